//! Lambert's problem: the orbits that connect two places in a given time.
//!
//! After D. Izzo, "Revisiting Lambert's problem", Celestial Mechanics and Dynamical Astronomy 121 (2015) 1-15,
//! built on E. R. Lancaster and R. C. Blanchard, NASA TN D-5368 (1969): one variable x for all conics (x < 1
//! ellipse, 1 parabola, > 1 hyperbola), Householder steps from his first guesses. Added here: forms that do not
//! cancel for short arcs, and a bracket around every root, so that no case depends on the guess.

mod curve;

use nalgebra::Vector3;

use crate::argument::{BadArgument, positive};
use curve::Curve;

/// Which way round.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Direction {
    /// Counter-clockwise seen from the pole, as the planets go.
    Prograde,
    /// Clockwise seen from the pole.
    Retrograde,
}

/// Two places and a time.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Transfer {
    /// Gravitational parameter; lengths and times below in any units that agree with it.
    pub gm: f64,
    /// Where the arc starts.
    pub from: Vector3<f64>,
    /// Where it ends.
    pub to: Vector3<f64>,
    /// Flight time.
    pub time: f64,
    /// Which way round.
    pub direction: Direction,
    /// The direction from which prograde is counter-clockwise: ecliptic north for planets. Where both places lie on
    /// one line through the centre it also gives the plane: the one nearest to being seen face-on from the pole.
    pub pole: Vector3<f64>,
    /// The most whole revolutions to try.
    pub revolutions_max: u32,
}

/// Which of the orbits with the same number of revolutions.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Branch {
    /// The only one: less than one revolution.
    Single,
    /// The one with the smaller x.
    Left,
    /// The one with the larger x.
    Right,
}

/// One orbit that connects both places.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Arc {
    /// Whole revolutions made.
    pub revolutions: u32,
    /// Which of the orbits with that many revolutions.
    pub branch: Branch,
    /// Velocity at the start.
    pub depart_velocity: Vector3<f64>,
    /// Velocity at the end.
    pub arrive_velocity: Vector3<f64>,
    /// Steps that the root took.
    pub steps: u32,
}

/// Sine of the angle at the centre below which both places count as lying on one line.
const ON_ONE_LINE: f64 = 1e-12;

/// Every orbit that connects both places in the given time and direction: the one of less than a revolution first,
/// then two for each number of revolutions that the time allows.
///
/// # Units
/// Any units that agree with `gm`; velocities come out in the same. The frame is that of the positions.
///
/// # Errors
/// [`BadArgument`] when `gm`, a distance, their separation or the time is not above zero, or when the places lie on
/// one line and the pole on it too.
///
/// # References
/// Izzo (2015), algorithm 1 and equations 5-31.
///
/// # Example
/// ```
/// use nalgebra::Vector3;
/// use orbits::lambert::{Direction, Transfer, arcs};
/// let quarter_circle = Transfer {
///     gm: 1.0,
///     from: Vector3::x(),
///     to: Vector3::y(),
///     time: std::f64::consts::FRAC_PI_2,
///     direction: Direction::Prograde,
///     pole: Vector3::z(),
///     revolutions_max: 0,
/// };
/// let found = arcs(&quarter_circle)?;
/// assert!((found[0].depart_velocity - Vector3::y()).norm() < 1e-14);
/// # Ok::<(), orbits::argument::BadArgument>(())
/// ```
pub fn arcs(transfer: &Transfer) -> Result<Vec<Arc>, BadArgument> {
    let gm = positive("gm", transfer.gm)?;
    let r1 = positive("from", transfer.from.norm())?;
    let r2 = positive("to", transfer.to.norm())?;
    let time = positive("time", transfer.time)?;
    let chord = positive("separation", (transfer.to - transfer.from).norm())?;
    let (radial1, radial2) = (transfer.from / r1, transfer.to / r2);
    let normal = normal_of_motion(transfer, &radial1, &radial2)?;

    // Half the angle at the centre, from the sum and difference of the unit vectors: no digits lost at 0 or 180 deg.
    let half_sin = 0.5 * (radial1 - radial2).norm();
    let half_cos = 0.5 * (radial1 + radial2).norm();
    let is_short_way = radial1.cross(&radial2).dot(&normal) >= 0.0;
    let semiperimeter = 0.5 * (r1 + r2 + chord);
    let mean_radius = (r1 * r2).sqrt();
    let lambda = if is_short_way { 1.0 } else { -1.0 } * mean_radius * half_cos / semiperimeter;
    let curve = |revolutions| Curve { lambda, shortfall: chord / semiperimeter, revolutions };
    let scaled_time = (2.0 * gm / semiperimeter).sqrt() / semiperimeter * time;

    let gamma = (0.5 * gm * semiperimeter).sqrt();
    let rho = (r1 - r2) / chord;
    let sigma = 2.0 * mean_radius * half_sin / chord;
    let (ahead1, ahead2) = (normal.cross(&radial1), normal.cross(&radial2));
    let arc = |revolutions: u32, branch: Branch, (x, steps): (f64, u32)| {
        let y = curve(revolutions).y(x);
        let (difference, sum) = (lambda * y - x, lambda * y + x);
        let transverse = gamma * sigma * (y + lambda * x);
        Arc {
            revolutions,
            branch,
            depart_velocity: (radial1 * (gamma * (difference - rho * sum)) + ahead1 * transverse) / r1,
            arrive_velocity: (radial2 * (-gamma * (difference + rho * sum)) + ahead2 * transverse) / r2,
            steps,
        }
    };

    let mut found = vec![arc(0, Branch::Single, curve(0).single_root(scaled_time))];
    for revolutions in 1..=transfer.revolutions_max {
        let Some([left, right]) = curve(revolutions).two_roots(scaled_time) else { break };
        found.push(arc(revolutions, Branch::Left, left));
        found.push(arc(revolutions, Branch::Right, right));
    }
    Ok(found)
}

/// Unit normal of the plane of motion, on the side from which the motion is counter-clockwise.
fn normal_of_motion(
    transfer: &Transfer,
    radial1: &Vector3<f64>,
    radial2: &Vector3<f64>,
) -> Result<Vector3<f64>, BadArgument> {
    let across = radial1.cross(radial2);
    let sine = across.norm();
    let prograde = if sine > ON_ONE_LINE {
        let normal = across / sine;
        if normal.dot(&transfer.pole) >= 0.0 { normal } else { -normal }
    } else {
        let sideways = transfer.pole - radial1 * transfer.pole.dot(radial1);
        let rule = "is too small: the places lie on one line with the pole, which leaves the plane open";
        let error = BadArgument { name: "angle between the places", value: sine, rule };
        sideways.try_normalize(ON_ONE_LINE * transfer.pole.norm()).ok_or(error)?
    };
    Ok(match transfer.direction {
        Direction::Prograde => prograde,
        Direction::Retrograde => -prograde,
    })
}
