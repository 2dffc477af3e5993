//! A progress bar for work that takes over a second, on a terminal only.

use std::sync::mpsc::{Receiver, RecvTimeoutError, Sender, channel};
use std::thread::JoinHandle;
use std::time::Duration;

use indicatif::{ProgressBar, ProgressStyle};

use super::console::Console;

/// Work shorter than this shows nothing.
const PATIENCE: Duration = Duration::from_secs(1);

/// Shows which stage the work has reached.
pub struct Progress {
    stages: Option<Sender<&'static str>>,
    painter: Option<JoinHandle<()>>,
}

impl Progress {
    /// Starts to watch work of so many stages.
    pub fn start(console: &Console, stages: u64) -> Self {
        if !console.shows_progress() {
            return Self {
                stages: None,
                painter: None,
            };
        }
        let (sender, receiver) = channel();
        Self {
            stages: Some(sender),
            painter: Some(std::thread::spawn(move || paint(&receiver, stages))),
        }
    }

    /// Says which stage begins.
    pub fn stage(&self, name: &'static str) {
        if let Some(stages) = &self.stages {
            // A painter that has gone has nothing to show.
            let _ = stages.send(name);
        }
    }
}

impl Drop for Progress {
    fn drop(&mut self) {
        // Hanging up ends the painter.
        self.stages = None;
        if let Some(painter) = self.painter.take() {
            let _ = painter.join();
        }
    }
}

/// Waits a second, then shows the stages as they come.
fn paint(stages: &Receiver<&'static str>, count: u64) {
    let begun = std::time::Instant::now();
    let mut reached = 0;
    let mut name = "";
    let mut bar: Option<ProgressBar> = None;
    loop {
        let wait = match bar {
            Some(_) => Duration::from_secs(3600),
            None => PATIENCE.saturating_sub(begun.elapsed()),
        };
        match stages.recv_timeout(wait) {
            Ok(stage) => {
                reached += 1;
                name = stage;
            }
            Err(RecvTimeoutError::Timeout) => {}
            Err(RecvTimeoutError::Disconnected) => break,
        }
        if begun.elapsed() >= PATIENCE {
            let bar = bar.get_or_insert_with(|| new_bar(count));
            bar.set_position(reached);
            bar.set_message(name);
        }
    }
    if let Some(bar) = bar {
        bar.finish_and_clear();
    }
}

/// A plain bar with the stage's name behind it.
fn new_bar(count: u64) -> ProgressBar {
    let bar = ProgressBar::new(count);
    if let Ok(style) = ProgressStyle::with_template("{bar:20} {pos}/{len} {msg}") {
        bar.set_style(style);
    }
    bar.enable_steady_tick(Duration::from_millis(200));
    bar
}
