//! Several models at a time, and their outcomes in the order in which the models were named.

use std::collections::BTreeMap;
use std::sync::atomic::{AtomicUsize, Ordering};
use std::sync::{Arc, mpsc};
use std::time::{Duration, Instant};

use super::input::Input;
use super::internal;
use super::reports::Outcome;
use super::status::Status;

/// The stack of a thread that computes, in bytes. Only what is touched is taken from memory.
const STACK: usize = 1 << 29;

/// How the outcome of one model is found.
pub type Work = dyn Fn(&Input) -> Outcome + Send + Sync;

/// What a worker tells: that it begins with a model, and what became of it.
enum News {
    Begun(usize),
    Ended(usize, Outcome),
}

/// The models, the work, and who is at it.
pub struct Schedule {
    models: Arc<Vec<Input>>,
    work: Arc<Work>,
    next: Arc<AtomicUsize>,
    tell: mpsc::Sender<News>,
    told: mpsc::Receiver<News>,
    /// How long one model may stay silent: a step that does not look at the clock must not keep the program forever.
    patience: Duration,
}

impl Schedule {
    /// For these models.
    pub fn new(models: Vec<Input>, patience: Duration, work: Arc<Work>) -> Schedule {
        let (tell, told) = mpsc::channel();
        Schedule { models: Arc::new(models), work, next: Arc::default(), tell, told, patience }
    }

    /// Works all models with so many threads, and hands the outcomes over in the order of the models.
    pub fn run(self, threads: usize, mut take: impl FnMut(&Input, Outcome)) {
        for _ in 0..threads.clamp(1, self.models.len().max(1)) {
            self.hire();
        }
        let (mut begun, mut waiting) = (BTreeMap::new(), BTreeMap::new());
        for (index, model) in self.models.iter().enumerate() {
            while !waiting.contains_key(&index) {
                self.listen(&mut begun, &mut waiting);
            }
            if let Some(outcome) = waiting.remove(&index) {
                take(model, outcome);
            }
        }
    }

    /// Takes one piece of news, or gives up models that have been silent for too long.
    fn listen(&self, begun: &mut BTreeMap<usize, Instant>, ended: &mut BTreeMap<usize, Outcome>) {
        let oldest = begun.values().min().map_or(Duration::ZERO, Instant::elapsed);
        match self.told.recv_timeout(self.patience.saturating_sub(oldest)) {
            Ok(News::Begun(index)) => {
                begun.insert(index, Instant::now());
            }
            // a model that was given up has its outcome already
            Ok(News::Ended(index, outcome)) if begun.remove(&index).is_some() => {
                ended.insert(index, outcome);
            }
            Ok(News::Ended(..)) => {}
            Err(_) => {
                let silent: Vec<usize> =
                    begun.iter().filter(|(_, at)| at.elapsed() >= self.patience).map(|(i, _)| *i).collect();
                for index in silent {
                    begun.remove(&index);
                    ended.insert(index, given_up(&self.models[index]));
                    self.hire();
                }
            }
        }
    }

    /// One more thread, which takes models as long as there are any.
    fn hire(&self) {
        let (models, work, next, tell) = (self.models.clone(), self.work.clone(), self.next.clone(), self.tell.clone());
        let body = move || {
            loop {
                let index = next.fetch_add(1, Ordering::Relaxed);
                let Some(model) = models.get(index) else { return };
                // the receiver is there as long as the program is
                let _ = tell.send(News::Begun(index));
                let _ = tell.send(News::Ended(index, internal::guarded(&model.name(), || work(model))));
            }
        };
        if let Err(error) = std::thread::Builder::new().stack_size(STACK).spawn(body) {
            self.fail(&format!("mainspring: no thread could be started: {error}"));
        }
    }

    /// Ends what has not been begun.
    fn fail(&self, message: &str) {
        for index in self.next.swap(self.models.len(), Ordering::Relaxed)..self.models.len() {
            let _ = self.tell.send(News::Begun(index));
            let _ = self.tell.send(News::Ended(index, Outcome::without_report(message, Status::Internal)));
        }
    }
}

fn given_up(model: &Input) -> Outcome {
    let message = format!("{}: the time limit was reached in the middle of a step; no result is given", model.name());
    Outcome::without_report(&message, Status::Undecided)
}
