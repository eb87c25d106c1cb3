use std::f64::consts::TAU;
use nalgebra::Vector3;
use orbits::lambert::*;
fn main() {
    let mut hist=[[0usize;81];2];
    for i in 0..2000000 {
        let part = |k: f64| (f64::from(i) * k).fract();
        let (angle, ratio) = (TAU * part(0.618_034), 0.2 * 25f64.powf(part(0.754_878)));
        let time = 0.1 * 1000f64.powf(part(0.569_840));
        let q = Transfer{gm:1.0,from:Vector3::x(),to:Vector3::new(ratio*angle.cos(),ratio*angle.sin(),0.0),time,direction:Direction::Prograde,pole:Vector3::z(),revolutions_max:3};
        for arc in arcs(&q).unwrap() { hist[usize::from(arc.revolutions>0)][arc.steps as usize]+=1; if arc.steps>8 {
            let a=1.0/(2.0-arc.depart_velocity.norm_squared());
            eprintln!("{angle} {ratio} {time} {:?} {} {} a={a}",arc.branch,arc.revolutions,arc.steps)}; }
    }
    for h in hist { eprintln!("{:?}", h.iter().enumerate().filter(|(_,n)|**n>0).collect::<Vec<_>>()); }
}
