//! A progress bar on a terminal, for what takes longer than a second.

use std::io::IsTerminal;
use std::sync::mpsc::{RecvTimeoutError, Sender, channel};
use std::thread::JoinHandle;
use std::time::Duration;

use crate::analysis::progress;

/// Nothing is shown before.
const PATIENCE: Duration = Duration::from_secs(1);
const REFRESH: Duration = Duration::from_millis(150);
const WIDTH: usize = 30;

/// Shows how far the work is until it is dropped.
pub(super) struct Bar {
    thread: Option<(Sender<()>, JoinHandle<()>)>,
}

impl Bar {
    /// A bar for a terminal; nothing for a file or pipe.
    pub(super) fn new() -> Self {
        if !std::io::stderr().is_terminal() {
            return Self { thread: None };
        }
        let (stop, stopped) = channel();
        let thread = std::thread::spawn(move || {
            let mut shown = false;
            let mut wait = PATIENCE;
            while stopped.recv_timeout(wait) == Err(RecvTimeoutError::Timeout) {
                anstream::eprint!("\r{}", line(progress()));
                shown = true;
                wait = REFRESH;
            }
            if shown {
                anstream::eprint!("\r{}\r", " ".repeat(WIDTH + 40));
            }
        });
        Self { thread: Some((stop, thread)) }
    }
}

impl Drop for Bar {
    fn drop(&mut self) {
        if let Some((stop, thread)) = self.thread.take() {
            // The thread ends by itself when its channel closes; a lost message changes nothing.
            drop(stop);
            let _ = thread.join();
        }
    }
}

/// `combinations [#####.....] 1 200 of 5 000`; before they are counted, that the structures are being solved.
fn line((done, all): (usize, usize)) -> String {
    if all == 0 {
        return "solving the structures".to_owned();
    }
    let full = (WIDTH * done / all).min(WIDTH);
    format!("combinations [{}{}] {done} of {all}", "#".repeat(full), ".".repeat(WIDTH - full))
}
