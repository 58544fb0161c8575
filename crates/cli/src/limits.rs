//! Time, memory and Ctrl-C, watched by one thread that raises one flag.

use linform_scalar::{Control, Stop};
use std::sync::Arc;
use std::sync::atomic::{AtomicU8, Ordering};
use std::time::{Duration, Instant};

const RUNNING: u8 = 0;
const TIME: u8 = 1;
const MEMORY: u8 = 2;
const INTERRUPT: u8 = 3;

/// How often the watcher looks.
const PERIOD: Duration = Duration::from_millis(10);

/// The largest number of terms of one polynomial, for each gigabyte of memory granted: a term takes about 100 bytes, and a
/// product, its factors and its result are in memory together.
const TERMS_PER_GIGABYTE: u64 = 1_000_000;

/// The control that the long computations ask: an atomic load each time.
pub(crate) struct Watch {
    flag: Arc<AtomicU8>,
    terms: usize,
}

impl Watch {
    /// Starts to watch. A second Ctrl-C ends the process at once.
    pub(crate) fn start(time_limit: Option<Duration>, memory_limit: u64) -> Watch {
        let flag = Arc::new(AtomicU8::new(RUNNING));
        let interrupted = Arc::clone(&flag);
        // Without a handler Ctrl-C ends the process at once, which loses no file; so a failure here may pass.
        let _ = ctrlc::set_handler(move || {
            if interrupted.swap(INTERRUPT, Ordering::Relaxed) == INTERRUPT {
                std::process::exit(i32::from(crate::exit::LIMIT));
            }
        });
        let watched = Arc::clone(&flag);
        let start = Instant::now();
        let watcher = std::thread::Builder::new().name("limits".to_owned());
        let _ = watcher.spawn(move || {
            while Arc::strong_count(&watched) > 1 {
                let reason = if time_limit.is_some_and(|limit| start.elapsed() >= limit) {
                    TIME
                } else if resident_bytes()
                    .is_some_and(|bytes| bytes >= memory_limit - memory_limit / 20)
                {
                    MEMORY
                } else {
                    RUNNING
                };
                if reason != RUNNING {
                    let _ = watched.compare_exchange(
                        RUNNING,
                        reason,
                        Ordering::Relaxed,
                        Ordering::Relaxed,
                    );
                }
                std::thread::sleep(PERIOD);
            }
        });
        let gigabytes = (memory_limit / 1_000_000_000).max(1);
        let terms =
            usize::try_from(gigabytes.saturating_mul(TERMS_PER_GIGABYTE)).unwrap_or(usize::MAX);
        Watch { flag, terms }
    }

    /// Did the user ask for the end?
    pub(crate) fn interrupted(&self) -> bool {
        self.flag.load(Ordering::Relaxed) == INTERRUPT
    }
}

impl Control for Watch {
    fn proceed(&self) -> Result<(), Stop> {
        match self.flag.load(Ordering::Relaxed) {
            RUNNING => Ok(()),
            TIME => Err(Stop::TimeLimit),
            MEMORY => Err(Stop::MemoryLimit),
            _ => Err(Stop::Interrupted),
        }
    }

    fn term_limit(&self) -> usize {
        self.terms
    }
}

/// The memory that the process holds, where the system tells it (Linux); elsewhere the limits on terms alone apply.
fn resident_bytes() -> Option<u64> {
    let text = std::fs::read_to_string("/proc/self/statm").ok()?;
    let pages: u64 = text.split_whitespace().nth(1)?.parse().ok()?;
    pages.checked_mul(4096)
}
