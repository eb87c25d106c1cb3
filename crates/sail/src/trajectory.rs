//! A flown trajectory: samples dense enough to draw, and what is extreme along it.

use nalgebra::Vector3;

/// One moment of a flight. Canonical units, radians.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Sample {
    /// Time since departure.
    pub time: f64,
    /// Heliocentric position; coplanar flights start on the +x axis and move towards +y.
    pub position: [f64; 3],
    /// Heliocentric velocity.
    pub velocity: [f64; 3],
    /// Cone angle; signed in coplanar flights.
    pub cone: f64,
    /// Clock angle; NaN where the cone angle is below 0.01 deg.
    pub clock: f64,
    /// Size of the sail acceleration.
    pub acceleration: f64,
    /// Inertial turn rate of the sail normal; NaN on the moment of a jump.
    pub turn_rate: f64,
}

/// A sudden change of attitude.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Jump {
    /// Time since departure.
    pub time: f64,
    /// Angle between the normals before and after, radians.
    pub angle: f64,
}

/// A flown trajectory. Canonical units, radians.
#[derive(Clone, Debug, PartialEq)]
pub struct Trajectory {
    /// Samples in time order, first and last moment included; two with one time around a jump.
    pub samples: Vec<Sample>,
    /// Attitude jumps.
    pub jumps: Vec<Jump>,
    /// Heliocentric angle swept.
    pub swept: f64,
    /// Time integral of the sail acceleration.
    pub delta_v: f64,
}

impl Trajectory {
    /// Smallest and largest distance from the Sun among the samples.
    pub fn distance_range(&self) -> (f64, f64) {
        let distances = self.samples.iter().map(|s| {
            let [x, y, z] = s.position;
            (x * x + y * y + z * z).sqrt()
        });
        distances.fold((f64::INFINITY, 0.0), |(low, high), r| (low.min(r), high.max(r)))
    }

    /// The same flight with its unit of length stretched to `length` au: Kepler's third law scales the rest.
    pub fn stretched(mut self, length: f64) -> Trajectory {
        let (time, speed) = (length.powf(1.5), length.powf(-0.5));
        for s in &mut self.samples {
            s.time *= time;
            s.position = s.position.map(|x| x * length);
            s.velocity = s.velocity.map(|v| v * speed);
            s.acceleration /= length * length;
            s.turn_rate /= time;
        }
        for jump in &mut self.jumps {
            jump.time *= time;
        }
        self.delta_v *= speed;
        self
    }

    /// Largest turn rate where it is smooth.
    pub fn turn_rate_max(&self) -> f64 {
        self.samples.iter().map(|s| s.turn_rate).fold(0.0, f64::max)
    }
}

/// How many samples to take.
#[derive(Clone, Copy, Debug)]
pub struct Sampling {
    /// Largest heliocentric angle between samples, radians.
    pub angle: f64,
}

impl Sampling {
    /// Fine enough to draw a flight that sweeps about `swept` radians, and no finer: some 800 samples at least,
    /// some 6000 at most.
    pub fn for_sweep(swept: f64) -> Sampling {
        Sampling { angle: (swept / 800.0).min(1.5f64.to_radians()).max(swept / 6000.0) }
    }

    /// Fractions to sample of a step that sweeps the angle `swept` (radians), its end included, its start not.
    pub fn fractions(&self, swept: f64) -> impl Iterator<Item = f64> + use<> {
        let count = (swept.abs() / self.angle).ceil().clamp(1.0, 200.0) as usize;
        (1..=count).map(move |i| i as f64 / count as f64)
    }
}

impl Sample {
    /// A coplanar sample from distance, radial and transverse speed at the heliocentric angle `theta`, with the
    /// signed `cone` angle and the signed inertial rate of the normal.
    pub fn coplanar(
        time: f64,
        [r, u, v]: [f64; 3],
        theta: f64,
        cone: f64,
        acceleration: f64,
        normal_rate: f64,
    ) -> Sample {
        let (sin, cos) = theta.sin_cos();
        let clock = if cone.abs() < CLOCK_UNDEFINED {
            f64::NAN
        } else if cone > 0.0 {
            0.0
        } else {
            std::f64::consts::PI
        };
        Sample {
            time,
            position: [r * cos, r * sin, 0.0],
            velocity: [u * cos - v * sin, u * sin + v * cos, 0.0],
            cone,
            clock,
            acceleration,
            turn_rate: normal_rate.abs(),
        }
    }
}

impl Sample {
    /// A sample in space from position, velocity and the unit `normal` of the sail.
    ///
    /// The clock angle counts from the orbital transverse direction towards the orbit normal.
    pub fn spatial(
        time: f64,
        position: Vector3<f64>,
        velocity: Vector3<f64>,
        normal: Vector3<f64>,
        acceleration: f64,
        turn_rate: f64,
    ) -> Sample {
        let outward = position.normalize();
        let pole = position.cross(&velocity).normalize();
        let forward = pole.cross(&outward);
        let (ahead, north) = (normal.dot(&forward), normal.dot(&pole));
        let cone = ahead.hypot(north).atan2(normal.dot(&outward));
        let clock = if cone < CLOCK_UNDEFINED { f64::NAN } else { north.atan2(ahead) };
        Sample {
            time,
            position: position.into(),
            velocity: velocity.into(),
            cone,
            clock,
            acceleration,
            turn_rate,
        }
    }
}

/// Below this cone angle (0.01 deg) the clock angle means nothing.
const CLOCK_UNDEFINED: f64 = 0.01 * std::f64::consts::PI / 180.0;
