//! A dated flight as seen from the Earth: range, light time, the angle from the Sun, and how the bodies stand.

use nalgebra::Vector3;
use orbits::argument::BadArgument;
use orbits::geometry::{FromEarth, from_earth, phase_angle_deg};

use crate::place::traveller;
use crate::report::{Columns, EarthView};
use crate::schema::Scenario;
