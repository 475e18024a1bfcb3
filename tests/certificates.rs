//! Every step that stands behind the answers for the examples is made anew from its certificate.

use std::cell::RefCell;
use std::path::Path;
use std::rc::Rc;
use std::time::Duration;

use mainspring::algebra::generator::Element;
use mainspring::language::Source;
use mainspring::proof::{replay, store};
use mainspring::vetting::{Allowance, Part, vet};

/// Elements by number.
#[derive(Default)]
struct Register(RefCell<Vec<Element>>);

impl Register {
    fn print(&self, e: &Element) -> String {
        self.0.borrow_mut().push(e.clone());
        (self.0.borrow().len() - 1).to_string()
    }

    fn read(&self, number: &str) -> Result<Element, String> {
        let place = number.parse::<usize>().map_err(|_| number.to_string())?;
        self.0.borrow().get(place).cloned().ok_or_else(|| number.to_string())
    }
}

#[test]
fn the_certificates_of_the_examples_are_replayed() {
    // however slow the machine, the clock has no say
    let allowance = Allowance { time: Duration::from_secs(100_000), ..Allowance::default() };
    let asked: Vec<Part> = Part::ALL.into_iter().filter(|part| *part != Part::Responses).collect();
    let folder = Path::new(env!("CARGO_MANIFEST_DIR")).join("examples");
    let mut replayed = 0;
    for entry in std::fs::read_dir(folder).unwrap() {
        let path = entry.unwrap().path();
        let source = Source::new(path.display().to_string(), std::fs::read_to_string(&path).unwrap());
        let vetting = vet(Rc::new(mainspring::read(&source, &[], allowance).unwrap()), &asked, allowance);
        let register = Register::default();
        let field = &vetting.model.field;
        let stored = store(field, &vetting.derivation, &|e| register.print(e));
        let again = replay(field, &stored, &|number| register.read(number));
        let again = again.unwrap_or_else(|rejected| panic!("{}: {rejected:?}", path.display()));
        assert_eq!(again.steps().len(), vetting.derivation.steps().len(), "{}", path.display());
        replayed += again.steps().len();
    }
    assert!(replayed > 100, "{replayed}");
}
