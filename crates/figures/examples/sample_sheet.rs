//! Writes the figures of invented flights as SVG files into the folder given as argument, to be looked at.

#[path = "../tests/sample/mod.rs"]
mod sample;

use figures::{FigureOptions, ThemeName, layout, svg};
use sample::{Cone, MARS, Spiral, flight, without_flight};
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
                    let height = figures::usual_height(figure, width).ok_or("unknown figure")?;
                    let options = FigureOptions { width, height, theme, ..FigureOptions::default() };
                    let look = if theme == ThemeName::Light { "light" } else { "dark" };
                    let path = folder.join(format!("{figure}_{name}_{look}_{width}.svg"));
                    std::fs::write(path, svg(&layout(figure, report, columns, &options)?))?;
                }
            }
        }
    }
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
