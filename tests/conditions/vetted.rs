//! Model texts with what the conditions say of them.

use mainspring::conditions::{Charts, ClaimFinding, Condition, Finding, Verdict, applies, examine, examine_claim};
use mainspring::language::{self, Source};
use mainspring::model::{self, Model};
use mainspring::proof::{Derivation, Prover};
use mainspring::restrictions::rescue;

/// A model with its findings.
pub struct Vetted {
    pub model: Model,
    pub findings: Vec<Finding>,
    pub claims: Vec<ClaimFinding>,
    pub derivation: Derivation,
}

/// Reads a model that must be readable.
pub fn read(text: &str) -> Model {
    try_read(text).unwrap_or_else(|message| panic!("{message}\nin\n{text}"))
}

/// Reads a model, or gives the first message.
pub fn try_read(text: &str) -> Result<Model, String> {
    let source = Source::new("test", text);
    let model = language::read(&source).and_then(|tree| model::elaborate(&source, &tree, &[]));
    model.map_err(|messages| messages[0].message.clone())
}

/// Vets all conditions and claims.
pub fn vet(text: &str) -> Vetted {
    vet_only(text, &Condition::ALL)
}

/// Vets some of the conditions, and all claims.
pub fn vet_only(text: &str, asked: &[Condition]) -> Vetted {
    let model = read(text);
    let mut prover = Prover::new(&model.field);
    let mut findings: Vec<Finding> = Vec::new();
    for condition in asked.iter().filter(|c| applies(**c, &model)) {
        let mut finding = examine(*condition, &model, &mut prover, &findings);
        rescue(&model, &mut finding);
        findings.push(finding);
    }
    let claims =
        model.claims.iter().map(|claim| examine_claim(&model, claim, &Charts::default(), &mut prover)).collect();
    let derivation = prover.into_derivation();
    Vetted { model, findings, claims, derivation }
}

impl Vetted {
    /// The finding on a condition that applies.
    pub fn on(&self, condition: Condition) -> &Finding {
        let found = self.findings.iter().find(|f| f.condition == condition);
        found.unwrap_or_else(|| panic!("{} does not apply", condition.name()))
    }

    /// The verdict on a condition that applies.
    pub fn verdict(&self, condition: Condition) -> Verdict {
        self.on(condition).verdict
    }

    /// The verdicts on homogeneity, adding-up, symmetry and curvature of a complete system.
    pub fn verdicts(&self) -> [Verdict; 4] {
        Condition::ALL.map(|condition| self.verdict(condition))
    }

    /// A branch of restrictions as "name = formula" texts.
    pub fn restrictions(&self, condition: Condition) -> Vec<Vec<String>> {
        let print = |e| mainspring::render::formula_text::plain(&self.model.field.formula(e));
        let branches = self.on(condition).restrictions.iter().flatten();
        branches.map(|b| b.equations.iter().map(|(v, e)| format!("{} = {}", print(v), print(e))).collect()).collect()
    }
}
