//! Writes the figures of invented flights as SVG files into the folder given as argument, to be looked at.

#[path = "../tests/sample/mod.rs"]
mod sample;

use figures::{FigureOptions, ThemeName, layout, svg};
use sample::{CROSSING, Cone, Crossing, MARS, Spiral, crossing, flight, without_flight};
use scenario::report::{Columns, Report, Status};

fn main() -> Result<(), Box<dyn std::error::Error>> {
    let folder = std::env::args_os().nth(1).ok_or("give a folder as argument")?;
    let folder = std::path::PathBuf::from(folder);
    std::fs::create_dir_all(&folder)?;
    let venus = Spiral { to: ("Venus", 0.72333566), ..MARS };
    let slow = Spiral { lightness: 0.001, rows: 6000, cone: Cone::Own, ..MARS };
    let far = Spiral { to: ("given orbit", 40.0), lightness: 0.17, rows: 2000, ..MARS };
    let near = Spiral { to: ("given orbit", 1.004), cone: Cone::Own, ..MARS };
    let inner = Spiral { to: ("given orbit", 0.2), lightness: 0.05, cone: Cone::Own, ..MARS };
    let jupiter = Spiral { to: ("Jupiter", 5.202887), lightness: 0.05, rows: 1500, ..MARS };
    let told = "no flight was found within the budget; a smaller loading or a nearer orbit may help.";
    let flights: Vec<(&str, (Report, Columns))> = vec![
        ("mars", flight(MARS)),
        ("swing", flight(Spiral { cone: Cone::Swing, rows: 1500, ..MARS })),
        ("venus", flight(venus)),
        ("slow", flight(slow)),
        ("far", flight(far)),
        ("near", flight(near)),
        ("inner", flight(inner)),
        ("jupiter", flight(jupiter)),
        ("none", without_flight(MARS, Status::NotConverged, told)),
    ];
    for (name, (report, columns)) in &flights {
        for theme in [ThemeName::Light, ThemeName::Dark] {
            for width in [360.0, 760.0] {
                for figure in figures::NAMES {
                    let height = figures::usual_height(figure, width, 4).ok_or("unknown figure")?;
                    let options = FigureOptions { width, height, theme, ..FigureOptions::default() };
                    let look = if theme == ThemeName::Light { "light" } else { "dark" };
                    let path = folder.join(format!("{figure}_{name}_{look}_{width}.svg"));
                    std::fs::write(path, svg(&layout(figure, report, columns, &options)?))?;
                }
            }
        }
    }
    space(&folder)?;
    let (report, columns) = flight(MARS);
    let zoomed = FigureOptions { zoom: 4.0, pan_x_au: 0.9, pan_y_au: 0.3, ..FigureOptions::default() };
    std::fs::write(folder.join("orbit_zoomed.svg"), svg(&layout("orbit", &report, &columns, &zoomed)?))?;
    let stale = FigureOptions { stale: true, width: 360.0, height: 360.0, ..FigureOptions::default() };
    std::fs::write(folder.join("orbit_stale.svg"), svg(&layout("orbit", &report, &columns, &stale)?))?;
    let wide = FigureOptions { width: 1400.0, height: 700.0, ..FigureOptions::default() };
    for figure in figures::NAMES {
        let drawn = svg(&layout(figure, &report, &columns, &wide)?);
        std::fs::write(folder.join(format!("{figure}_wide.svg")), drawn)?;
    }
    Ok(())
}

/// Flights in space from several sides.
fn space(folder: &std::path::Path) -> Result<(), Box<dyn std::error::Error>> {
    let steep = Crossing {
        to: "the 0.48 au orbit",
        shape: (0.48, 0.2),
        angles_deg: [30.0, 20.0, 60.0],
        turns: 6.3,
        rows: 2400,
        dates: None,
        ..CROSSING
    };
    let body = Crossing {
        to: "the 1.3 au orbit",
        shape: (1.3, 0.35),
        angles_deg: [18.0, 130.0, 250.0],
        start_deg: 20.0,
        turns: 0.85,
        dates: Some(("2029-02-11", "2030-01-20")),
        ahead_deg: 70.0,
        ..CROSSING
    };
    let back = Crossing { shape: (3.0, 0.7), angles_deg: [115.0, 300.0, 80.0], turns: 2.4, ..body };
    for (name, flown) in [("rendezvous", CROSSING), ("steep", steep), ("body", body), ("back", back)] {
        let (report, columns) = crossing(flown);
        for (theme, look) in [(ThemeName::Light, "light"), (ThemeName::Dark, "dark")] {
            for width in [360.0, 760.0, 1400.0] {
                for (tilt_deg, turn_deg) in [(0.0, 0.0), (60.0, 20.0), (90.0, 0.0)] {
                    let height = if width > 1000.0 { 900.0 } else { width };
                    let cursor_t_d = (tilt_deg == 60.0).then_some(120.0);
                    let options = FigureOptions {
                        width,
                        height,
                        theme,
                        tilt_deg,
                        turn_deg,
                        cursor_t_d,
                        ..FigureOptions::default()
                    };
                    let drawn = svg(&layout("orbit", &report, &columns, &options)?);
                    let file = format!("space_{name}_{look}_{width}_{tilt_deg}.svg");
                    std::fs::write(folder.join(file), drawn)?;
                }
                let usual = figures::usual_panels(&report, &columns);
                let mut panels: Vec<String> = usual.iter().map(|name| (*name).to_owned()).collect();
                if name == "body" {
                    panels.extend(["film_temp_k".to_owned(), "sail_accel_mm_s2".to_owned()]);
                }
                let height =
                    figures::usual_height("histories", width, panels.len()).ok_or("unknown figure")?;
                let options = FigureOptions { width, height, theme, panels, ..FigureOptions::default() };
                let drawn = svg(&layout("histories", &report, &columns, &options)?);
                std::fs::write(folder.join(format!("space_{name}_{look}_{width}_histories.svg")), drawn)?;
            }
        }
    }
    Ok(())
}
