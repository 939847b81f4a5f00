//! Least and greatest areas of steel and the tie force at an end support: EN 1992-1-1:2004 9.2.1 and 9.3.1.

use crate::base::num;
use crate::rules::anchorage::fctm;
use crate::tables::tables;
use crate::trace::{Step, Worked, ec2};

/// As,min, mm²/m, for an effective depth `d` mm (9.2.1.1(1), 9.3.1.1(1)).
pub fn least(fck: f64, fyk: f64, d: f64) -> Worked {
    let ratio = (0.26 * fctm(fck) / fyk).max(0.0013);
    let value = ratio * 1000.0 * d;
    let step = Step::new(
        "least area As,min",
        format!("max(0.26 fctm/fyk, 0.0013) b d = max(0.26 × {}/{}, 0.0013) × 1000 × {}", num(fctm(fck), 3), num(fyk, 0), num(d, 1)),
        format!("{} mm²/m", num(value, 1)),
    )
    .cited(ec2("9.2.1.1(1)"));
    Worked { value, steps: vec![step] }
}

/// As,max, mm²/m, of a slab `h` mm deep (9.2.1.1(3)).
pub fn most(h: f64) -> f64 {
    tables().national.area_most.value * 1000.0 * h
}

/// Share of the main steel that distribution has to give at least (9.3.1.1(2)).
pub const DISTRIBUTION_SHARE: f64 = 0.20;

/// Uniform design load, kN/m² (EN 1990 (6.10)).
pub fn design_load(permanent: f64, variable: f64) -> f64 {
    let n = &tables().national;
    n.gamma_g.value * permanent + n.gamma_q.value * variable
}

/// Tie force FE at an end support, kN/m, from the shear there (9.2.1.4(2)); al = d and z = 0.9 d.
pub fn end_tie_force(shear: f64) -> Worked {
    let value = shear / 0.9;
    let step = Step::new("tie force FE", format!("VEd al/z = {} × d / (0.9 d)", num(shear, 2)), format!("{} kN/m", num(value, 2))).cited(ec2("9.2.1.4(2)"));
    Worked { value, steps: vec![step] }
}

/// Shear at a simple end without actions in the job: half of the design load on the effective span, kN/m.
pub fn end_shear(permanent: f64, variable: f64, effective_mm: f64) -> Worked {
    let load = design_load(permanent, variable);
    let value = 0.5 * load * effective_mm / 1000.0;
    let step = Step::new(
        "end shear VEd",
        format!("0.5 (1.35 G + 1.5 Q) leff = 0.5 × {} × {}", num(load, 3), num(effective_mm / 1000.0, 4)),
        format!("{} kN/m", num(value, 2)),
    )
    .cited(ec2("9.2.1.4(2), EN 1990 6.10"));
    Worked { value, steps: vec![step] }
}

/// Service stress in the steel estimated without actions: fyd (G + ψ2 Q)/(1.35 G + 1.5 Q) As,req/As,prov, N/mm².
pub fn service_stress(permanent: f64, variable: f64, fyd: f64, required: f64, provided: f64) -> f64 {
    let n = &tables().national;
    let design = design_load(permanent, variable);
    if design <= 0.0 || provided <= 0.0 {
        return 0.0;
    }
    fyd * (permanent + n.psi_2.value * variable) / design * (required / provided).min(1.0)
}
