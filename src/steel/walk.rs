//! The exact centre line of a bent bar: straight pieces and arcs, walked one after another.

use crate::steel::bend::{BendError, Bent};
use crate::tables::{Apex, Radius, Walk};

/// A bar as walked: exact centre-line length and a chain of points with true arcs, mm, starting at the origin along +x.
#[derive(Clone, Debug)]
pub struct Walked {
    pub length: f64,
    pub points: Vec<[f64; 2]>,
    /// Least straight piece between two bends; infinite with fewer than two.
    pub least_straight: f64,
}

/// A bend on the way: angle (degrees, + left), internal radius, and how much of each neighbouring leg it uses.
struct Bend {
    angle: f64,
    radius: f64,
    used: f64,
}

/// Walks the bar. Errors where legs are too short for their bends or an offset is longer than its slope.
pub fn walk(bent: &Bent) -> Result<Walked, BendError> {
    let mut legs: Vec<(char, f64)> = Vec::new();
    let mut bends: Vec<Bend> = Vec::new();
    for part in &bent.shape.path {
        match part {
            Walk::Leg { leg } => {
                let letter = leg.chars().next().unwrap_or('A');
                legs.push((letter, bent.dims.get(&letter).copied().unwrap_or(0.0)));
            }
            turn => bends.push(bend(bent, turn)?),
        }
    }
    let mut straights = Vec::new();
    for (i, (letter, leg)) in legs.iter().enumerate() {
        let before = if i > 0 { bends[i - 1].used } else { 0.0 };
        let after = bends.get(i).map_or(0.0, |b| b.used);
        let straight = leg - before - after;
        if straight < -crate::base::TOUCH {
            return Err(BendError::Impossible(format!(
                "leg {letter} of {} mm is shorter than its bends take up ({} mm)",
                crate::base::mm(*leg),
                crate::base::mm(before + after)
            )));
        }
        straights.push(straight.max(0.0));
    }
    Ok(trace(&straights, &bends, f64::from(bent.bar.d)))
}

fn bend(bent: &Bent, turn: &Walk) -> Result<Bend, BendError> {
    let d = f64::from(bent.bar.d);
    match turn {
        Walk::Turn { turn, radius: Radius::Crown } => {
            let outer = bent.dims.get(&'B').copied().unwrap_or(0.0) / 2.0;
            if outer <= d {
                return Err(BendError::Impossible("B is too small for a semicircle of this size".into()));
            }
            Ok(Bend { angle: *turn, radius: outer - d, used: outer })
        }
        Walk::Turn { turn, radius } => {
            let inner = match radius {
                Radius::Scheduled => bent.dims.get(&'R').copied().unwrap_or(bent.bar.radius),
                _ => bent.bar.radius,
            };
            let used = (inner + d) * (turn.abs() / 2.0).to_radians().tan();
            Ok(Bend { angle: *turn, radius: inner, used })
        }
        Walk::TurnBy { turn_by, apex, back } => {
            let value = |name: &str| name.chars().next().and_then(|l| bent.dims.get(&l)).copied().unwrap_or(0.0);
            let (rise, along) = (value(&turn_by.rise) - turn_by.thick * d, value(&turn_by.along));
            if rise < 0.0 || rise >= along {
                return Err(BendError::Impossible(format!("the offset {} has to be less than {} along the slope", turn_by.rise, turn_by.along)));
            }
            let angle = (rise / along).asin();
            let line = match apex {
                Apex::Outer => bent.bar.radius + d,
                Apex::Centre => bent.bar.radius + d / 2.0,
            };
            let sign = if *back { -1.0 } else { 1.0 };
            Ok(Bend { angle: sign * angle.to_degrees(), radius: bent.bar.radius, used: line * (angle / 2.0).tan() })
        }
        Walk::Leg { .. } => Ok(Bend { angle: 0.0, radius: 0.0, used: 0.0 }),
    }
}

fn trace(straights: &[f64], bends: &[Bend], d: f64) -> Walked {
    const CHORD: f64 = 10.0;
    let mut at = [0.0f64, 0.0];
    let mut heading = 0.0f64;
    let mut length = 0.0;
    let mut points = vec![at];
    for (i, straight) in straights.iter().enumerate() {
        at = [at[0] + straight * heading.cos(), at[1] + straight * heading.sin()];
        length += straight;
        points.push(at);
        if let Some(bend) = bends.get(i) {
            let radius = bend.radius + d / 2.0;
            let angle = bend.angle.to_radians();
            length += radius * angle.abs();
            let pieces = ((bend.angle.abs() / CHORD).ceil() as usize).max(1);
            let step = angle / pieces as f64;
            let chord = 2.0 * radius * (step.abs() / 2.0).sin();
            for _ in 0..pieces {
                heading += step / 2.0;
                at = [at[0] + chord * heading.cos(), at[1] + chord * heading.sin()];
                heading += step / 2.0;
                points.push(at);
            }
        }
    }
    let inner = straights.get(1..straights.len().saturating_sub(1)).unwrap_or(&[]);
    Walked { length, points, least_straight: inner.iter().copied().fold(f64::INFINITY, f64::min) }
}
