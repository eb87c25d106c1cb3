//! x
use optimal::spatial::{curves::*, ends::*, launch::*};
use numerics::arclength::*;
use orbits::{ephemeris::Traveller, planets::Planet, units, kepler::Elements};
fn main(){
  let fe=Traveller::Planet(Planet::Earth).elements(0.0);
  let mut seed=12345u64; let mut rnd=||{ seed=seed.wrapping_mul(6364136223846793005).wrapping_add(1442695040888963407); (seed>>11) as f64/(1u64<<53) as f64 };
  for _ in 0..700 { rnd(); }
  for k in 0..100 {
      let a=(0.3f64.ln()+rnd()*(5.0f64/0.3).ln()).exp(); let e=rnd()*0.6; let i=rnd()*60.0; let ac=((0.6f64).ln()+rnd()*((3.0/0.6) as f64).ln()).exp();
      let ft=Elements{semi_major_axis:a,eccentricity:e,inclination_rad:(i as f64).to_radians(),node_rad:rnd()*6.28,arg_peri_rad:rnd()*6.28,mean_anomaly_rad:rnd()*6.28};
      if ![9,41,66,94].contains(&k) { continue; }
      println!("== {k} a {a:.2} e {e:.2} i {i:.1} ac {ac:.3}");
      let care=Care::CAREFUL;
      let st=Stride{first:0.05,largest:0.6,smallest:1e-6,accept:2e-3,wanted_correction:0.0015,budget:1500};
      let s=Setting{ends:Ends::new(fe,ft),lightness:units::lightness(ac),tolerance:care.tolerance};
      let mut pts=vec![];
      for q in 0..16 { let dep=q as f64*6.2832/16.0; let mut sh=s; sh.ends.from=sh.ends.from.later(1.0,dep);
        let start=coplanar_point(&sh).unwrap();
        let f=follow(&Growing(&sh),start,&Goal{parameter:Growing::scaled(1.0),sign:1.0},&st,&mut |_|true);
        print!("{dep:.2}:{:?}/{:.3} ",f.ended,f.point.time); if f.ended==Ended::Reached {pts.push(Point{parameter:dep,..f.point});} }
      println!(); pts.sort_by(|a,b|a.time.total_cmp(&b.time));
      for p0 in pts.iter().take(2) { for sign in [1.0,-1.0] {
        let g=|p:&Point|{ let st=s.ends.departure(1.0,p.parameter).unwrap(); let r=coasting_rate(&st); (0..6).map(|i|p.costate[i]*r[i]).sum::<f64>() };
        let mut n=0; let mut log=vec![(p0.parameter,p0.time,g(p0))];
        let fo=follow(&Leaving(&s),*p0,&Goal{parameter:f64::INFINITY*sign,sign},&st,&mut |p|{ n+=1; if n%10==0&&n<300 {log.push((p.parameter,p.time,g(p)));} (p.parameter-p0.parameter).abs()<6.3 });
        println!("  march {sign} {:?} jac {} {:.3?}",fo.ended,fo.jacobians,log); } }
  }
}
