//! x
use optimal::spatial::{curves::*, ends::*, launch::*, rendezvous::*};
use orbits::{ephemeris::Traveller, planets::Planet, units};
use std::time::Instant;
fn main(){
  let care = if std::env::args().nth(1).as_deref()==Some("slow") {Care::SLOW} else {Care::QUICK};
  for p in [Planet::Mars,Planet::Venus,Planet::Mercury] { for ac in [0.5,1.0,2.0] {
    let mut times=vec![]; let mut br=0; let mut dates=0; let mut prev=f64::NEG_INFINITY; let mut viol=0;
    let syn = orbits::hohmann::synodic_d(365.25, Traveller::Planet(p).elements(0.0).semi_major_axis.powf(1.5)*365.25).unwrap();
    for k in 0..24 { let d0=9131.0+syn*k as f64/24.0;
      let from=Traveller::Planet(Planet::Earth).elements(d0); let to=Traveller::Planet(p).elements(d0);
      let s=Setting{ends:Ends::new(from,to),lightness:units::lightness(ac),tolerance:1e-9};
      let t=Instant::now(); let b=branches(&s,&care); times.push(t.elapsed().as_secs_f64()*1e3);
      br+=b.len(); if !b.is_empty() {dates+=1; let m=b.iter().map(|p|p.time).fold(1e9,f64::min)*units::TIME_UNIT_D; if d0+m<prev {viol+=1;} prev=d0+m; }
    }
    times.sort_by(f64::total_cmp);
    println!("{:?} {ac} dates {dates} branches {br} viol {viol} median {:.1} ms max {:.1}",p,times[12],times[23]);
  }}
}
