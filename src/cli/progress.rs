//! Progress on a terminal: what is done, how fast, how long it will take. Silent anywhere else.

use crate::pipeline::{Progress, Unit};
use indicatif::{ProgressBar, ProgressDrawTarget, ProgressState, ProgressStyle};
use std::fmt::Write;
use std::io::IsTerminal;
use std::sync::Mutex;
use std::time::Duration;

/// A bar on stderr; draws nothing when stderr is no terminal or the user wants quiet.
#[derive(Debug, Default)]
pub struct Bar {
    shown: bool,
    bar: Mutex<Option<ProgressBar>>,
}

impl Bar {
    pub fn new(quiet: bool) -> Bar {
        Bar { shown: !quiet && std::io::stderr().is_terminal(), bar: Mutex::new(None) }
    }

    fn with_bar(&self, act: impl FnOnce(&mut Option<ProgressBar>)) {
        // A thread that died while drawing is no reason to stop counting.
        act(&mut self.bar.lock().unwrap_or_else(std::sync::PoisonError::into_inner));
    }
}

impl Progress for Bar {
    fn start(&self, doing: &str, total: Option<u64>, unit: Unit) {
        if !self.shown {
            return;
        }
        let (count, rate) = match unit {
            Unit::Bytes => ("{bytes} of {total_bytes}", "{bytes_per_sec}"),
            Unit::Games => ("{pos} of {len} games", "{rate}"),
            Unit::Plays => ("{pos} of {len} plays", "{rate}"),
        };
        let template = match total {
            Some(_) => format!("{{msg}} [{{bar:30}}] {count}, {rate}, {{eta}} left"),
            None => format!("{{msg}} {{spinner}} {}, {rate}, {{elapsed}}", count.split(" of ").next().unwrap_or("{pos}")),
        };
        let style = ProgressStyle::with_template(&template)
            .unwrap_or_else(|_| ProgressStyle::default_bar())
            .with_key("rate", |state: &ProgressState, text: &mut dyn Write| {
                // A bar that cannot be drawn is no reason to stop the work.
                let _ = write!(text, "{:.1}/s", state.per_sec());
            })
            .progress_chars("=> ");
        let bar = total.map_or_else(ProgressBar::no_length, ProgressBar::new);
        bar.set_draw_target(ProgressDrawTarget::stderr_with_hz(10));
        bar.set_style(style);
        bar.set_message(doing.to_string());
        bar.enable_steady_tick(Duration::from_millis(200));
        self.with_bar(|slot| {
            if let Some(old) = slot.replace(bar) {
                old.finish_and_clear();
            }
        });
    }

    fn advance(&self, by: u64) {
        if self.shown {
            self.with_bar(|slot| slot.iter().for_each(|bar| bar.inc(by)));
        }
    }

    fn finish(&self) {
        self.with_bar(|slot| slot.take().iter().for_each(ProgressBar::finish_and_clear));
    }
}
