//! Natural continuation: following a solution while one parameter moves from 0 to 1.

/// How to follow.
#[derive(Clone, Copy, Debug)]
pub struct Pace {
    /// First step of the parameter.
    pub first: f64,
    /// Largest step.
    pub largest: f64,
    /// Below this the path counts as lost.
    pub smallest: f64,
    /// A solve that needs at most this many passes lets the step grow.
    pub easy_passes: usize,
}

/// Where the path was lost.
#[derive(Clone, Debug)]
pub struct Lost<P> {
    /// Last parameter solved.
    pub parameter: f64,
    /// Solution there.
    pub point: P,
}

/// Follows the solution `start` at parameter 0 to parameter 1.
///
/// `solve(parameter, guess)` returns the solution and the passes it took. `ahead(before, now, ratio)` predicts the next
/// solution from the last two, `ratio` being the next step over the last; it is given `before == now` at first.
///
/// # Errors
/// [`Lost`] when the step shrinks below `pace.smallest`.
pub fn follow<P: Clone>(
    start: P,
    pace: &Pace,
    mut solve: impl FnMut(f64, P) -> Option<(P, usize)>,
    ahead: impl Fn(&P, &P, f64) -> P,
) -> Result<P, Lost<P>> {
    let (mut before, mut now) = (start.clone(), start);
    let (mut parameter, mut step, mut last_step) = (0.0, pace.first, pace.first);
    while parameter < 1.0 {
        let to = if parameter + step > 1.0 - 1e-12 { 1.0 } else { parameter + step };
        match solve(to, ahead(&before, &now, (to - parameter) / last_step)) {
            Some((point, passes)) => {
                last_step = to - parameter;
                (before, now, parameter) = (now, point, to);
                if passes <= pace.easy_passes {
                    step = (step * 1.8).min(pace.largest);
                }
            }
            None => {
                step = (to - parameter) * 0.35;
                if step < pace.smallest {
                    return Err(Lost { parameter, point: now });
                }
            }
        }
    }
    Ok(now)
}

#[cfg(test)]
mod tests {
    use super::*;

    const PACE: Pace = Pace { first: 0.2, largest: 0.5, smallest: 1e-4, easy_passes: 4 };

    /// Newton on x^3 + x = 30 s, told as lost beyond `limit`.
    fn cube(s: f64, guess: f64, limit: f64) -> Option<(f64, usize)> {
        let mut x = guess;
        for pass in 1..=6 {
            let f = x * x * x + x - 30.0 * s;
            if f.abs() < 1e-12 {
                return (s <= limit).then_some((x, pass));
            }
            x -= f / (3.0 * x * x + 1.0);
        }
        None
    }

    fn line(before: &f64, now: &f64, ratio: f64) -> f64 {
        now + (now - before) * ratio
    }

    #[test]
    fn the_path_ends_on_the_planted_solution() {
        let end = follow(0.0, &PACE, |s, guess| cube(s, guess, 1.0), line).expect("no folds on this path");
        assert!((end - 3.0).abs() < 1e-12);
    }

    #[test]
    fn a_lost_path_says_how_far_it_came() {
        let lost = follow(0.0, &PACE, |s, guess| cube(s, guess, 0.6), line).expect_err("stops at 0.6");
        assert!(lost.parameter > 0.59 && lost.parameter <= 0.6);
    }
}
