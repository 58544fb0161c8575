//! The progress bar.

use indicatif::{ProgressBar, ProgressDrawTarget, ProgressStyle};
use linform_engine::Observer;
use std::time::Duration;

/// A bar on standard error, drawn only on a terminal and only for work that lasts.
pub(crate) struct Progress {
    bar: ProgressBar,
}

impl Progress {
    pub(crate) fn new(quiet: bool) -> Progress {
        let target = if quiet {
            ProgressDrawTarget::hidden()
        } else {
            ProgressDrawTarget::stderr_with_hz(10)
        };
        let bar = ProgressBar::with_draw_target(None, target);
        if let Ok(style) =
            ProgressStyle::with_template("{msg} {pos} of {len} claims {bar:30} about {eta} left")
        {
            bar.set_style(style);
        }
        bar.enable_steady_tick(Duration::from_millis(200));
        Progress { bar }
    }

    pub(crate) fn finish(&self) {
        self.bar.finish_and_clear();
    }
}

impl Observer for Progress {
    fn evaluated(&self, done: usize, total: usize) {
        // One definition takes microseconds: redrawing for each would cost more than the work.
        if done.is_multiple_of(64) || done == total {
            self.bar
                .set_message(format!("{done} of {total} definitions,"));
        }
    }

    fn decided(&self, done: usize, total: usize) {
        self.bar.set_length(total as u64);
        self.bar.set_position(done as u64);
    }
}
