//! A trajectory in the units of the report's columns.

use orbits::constants::AU_KM;
use orbits::units;
use sail::film::Optics;
use sail::temperature::film_temperature_k;
use sail::trajectory::{Sample, Trajectory};

use crate::report::{Columns, Jump};

/// Histories of a flight, with the film temperature of a film with these `thermal` numbers.
pub(crate) fn columns(trajectory: &Trajectory, thermal: &Optics) -> Columns {
    let samples = &trajectory.samples;
    let each = |f: &dyn Fn(&Sample) -> f64| samples.iter().map(f).collect::<Vec<f64>>();
    let distance = |s: &Sample| s.position[0].hypot(s.position[1]).hypot(s.position[2]);
    let speed = |s: &Sample| s.velocity[0].hypot(s.velocity[1]).hypot(s.velocity[2]);
    let absent = vec![f64::NAN; samples.len()];
    Columns {
        t_d: each(&|s| units::days(s.time)),
        x_au: each(&|s| s.position[0]),
        y_au: each(&|s| s.position[1]),
        z_au: each(&|s| s.position[2]),
        vx_km_s: each(&|s| units::km_per_s(s.velocity[0])),
        vy_km_s: each(&|s| units::km_per_s(s.velocity[1])),
        vz_km_s: each(&|s| units::km_per_s(s.velocity[2])),
        cone_deg: each(&|s| s.cone.to_degrees()),
        clock_deg: each(&|s| s.clock.to_degrees()),
        distance_au: each(&distance),
        speed_km_s: each(&|s| units::km_per_s(speed(s))),
        sail_accel_mm_s2: each(&|s| units::mm_per_s2(s.acceleration)),
        turn_rate_deg_d: each(&|s| turn_rate_deg_d(s.turn_rate)),
        film_temp_k: each(&|s| film_temperature_k(thermal, distance(s), s.cone.cos())),
        earth_range_au: absent.clone(),
        sun_earth_craft_deg: absent,
    }
}

/// Degrees per day of a canonical turn rate.
pub(crate) fn turn_rate_deg_d(turn_rate: f64) -> f64 {
    turn_rate.to_degrees() / units::days(1.0)
}

/// Attitude jumps in the report's units.
pub(crate) fn jumps(trajectory: &Trajectory) -> Vec<Jump> {
    let told = |jump: &sail::trajectory::Jump| Jump {
        time_d: units::days(jump.time),
        angle_deg: jump.angle.to_degrees(),
    };
    trajectory.jumps.iter().map(told).collect()
}

/// Kilometres of a canonical length.
pub(crate) fn km(length: f64) -> f64 {
    length * AU_KM
}
