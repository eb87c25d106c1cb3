//! The items of a study on several threads, and how far they have come.

use std::io::{IsTerminal, Write};
use std::sync::Mutex;
use std::sync::atomic::{AtomicUsize, Ordering};
use std::time::{Duration, Instant};

use scenario::study::{Item, Point, Study};

/// Every point of the study, on so many threads; the number changes no digit.
pub(crate) fn evaluated(study: &Study, jobs: usize) -> Vec<Point> {
    let items = study.items();
    let mut points = on_threads(study, &items, jobs);
    let mends = study.mends(&points);
    points.extend(on_threads(study, &mends, jobs));
    points
}

/// Evaluates items; each thread takes the next one that nobody has.
fn on_threads(study: &Study, items: &[Item], jobs: usize) -> Vec<Point> {
    let next = AtomicUsize::new(0);
    let flights = items.iter().map(|item| item.end - item.first).sum();
    let shared = Mutex::new((Vec::new(), Progress::new(flights)));
    std::thread::scope(|scope| {
        for _ in 0..jobs.clamp(1, items.len().max(1)) {
            scope.spawn(|| {
                while let Some(item) = items.get(next.fetch_add(1, Ordering::Relaxed)) {
                    let points = study.evaluate(item);
                    // A thread that panicked ends the program anyway.
                    let Ok(mut shared) = shared.lock() else { return };
                    shared.1.add(points.len());
                    shared.0.extend(points);
                }
            });
        }
    });
    let (points, progress) = shared.into_inner().unwrap_or_else(|broken| broken.into_inner());
    progress.clear();
    points
}

/// A line on standard error that says how far a study has come; silent where nobody looks.
struct Progress {
    flights: usize,
    done: usize,
    started: Instant,
    told: Option<Instant>,
    watched: bool,
}

const BETWEEN: Duration = Duration::from_millis(200);

impl Progress {
    fn new(flights: usize) -> Progress {
        let watched = std::io::stderr().is_terminal();
        Progress { flights, done: 0, started: Instant::now(), told: None, watched }
    }

    fn add(&mut self, flights: usize) {
        self.done += flights;
        if !self.watched || self.told.is_some_and(|told| told.elapsed() < BETWEEN) {
            return;
        }
        self.told = Some(Instant::now());
        let line = line(self.done, self.flights, self.started.elapsed().as_secs_f64());
        // Progress that cannot be written is no reason to stop.
        let _ = write!(std::io::stderr(), "\r\x1b[K{line}");
    }

    fn clear(&self) {
        if self.told.is_some() {
            let _ = write!(std::io::stderr(), "\r\x1b[K");
        }
    }
}

/// `120 of 2400 flights, 240 a second, 10 s left`.
fn line(done: usize, flights: usize, seconds: f64) -> String {
    let rate = done as f64 / seconds.max(1e-3);
    let left_s = (flights - done) as f64 / rate;
    format!("{done} of {flights} flights, {rate:.0} a second, {} left", duration(left_s))
}

fn duration(seconds: f64) -> String {
    if seconds < 100.0 { format!("{seconds:.0} s") } else { format!("{:.0} min", seconds / 60.0) }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn progress_tells_rate_and_time_left() {
        assert_eq!(line(120, 2400, 0.5), "120 of 2400 flights, 240 a second, 10 s left");
        assert_eq!(line(10, 20_000, 1.0), "10 of 20000 flights, 10 a second, 33 min left");
    }
}
