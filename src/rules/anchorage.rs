//! Bond, anchorage and laps: EN 1992-1-1:2004 8.4 and 8.7 with the UK values.

use crate::base::num;
use crate::tables::tables;
use crate::trace::{Step, Worked, ec2};

#[derive(Clone, Copy, Debug, PartialEq)]
pub enum Bond {
    Good,
    Poor,
}

/// Bond of a top bar in a slab `h` mm deep: poor where the slab is deeper than 250 mm (Figure 8.2).
pub fn top_bond(h: f64) -> Bond {
    if h > 250.0 { Bond::Poor } else { Bond::Good }
}

/// Mean tensile strength, N/mm², of concrete up to C50/60 (Table 3.1).
pub fn fctm(fck: f64) -> f64 {
    0.30 * (fck * fck).cbrt()
}

/// Characteristic tensile strength, 5 % fractile, N/mm² (Table 3.1).
pub fn fctk_005(fck: f64) -> f64 {
    0.7 * fctm(fck)
}

/// Design tensile strength, N/mm² (3.1.6(2)); αct 1.0, γc 1.5.
pub fn fctd(fck: f64) -> f64 {
    let n = &tables().national;
    n.alpha_ct.value * fctk_005(fck) / n.gamma_c.value
}

/// Design yield strength of the steel, N/mm² (3.2.7).
pub fn fyd(fyk: f64) -> f64 {
    fyk / tables().national.gamma_s.value
}

/// η2: 1.0 up to 32 mm, (132 - φ)/100 over (8.4.2(2)).
fn eta2(size: f64) -> f64 {
    if size <= 32.0 { 1.0 } else { (132.0 - size) / 100.0 }
}

/// Design bond strength fbd, N/mm² (8.4.2(2)).
pub fn fbd(fck: f64, size: u32, bond: Bond) -> Worked {
    let eta1 = if bond == Bond::Good { 1.0 } else { 0.7 };
    let (eta2, fctd) = (eta2(f64::from(size)), fctd(fck));
    let value = 2.25 * eta1 * eta2 * fctd;
    let steps = vec![
        Step::new("design tensile strength fctd", format!("αct 0.7 × 0.30 fck^(2/3) / γc, fck = {}", num(fck, 1)), format!("{} N/mm²", num(fctd, 3)))
            .cited(ec2("3.1.6(2), Table 3.1")),
        Step::new(
            "bond strength fbd",
            format!("2.25 η1 η2 fctd = 2.25 × {} × {} × {}", num(eta1, 2), num(eta2, 2), num(fctd, 3)),
            format!("{} N/mm²", num(value, 3)),
        )
        .cited(ec2("8.4.2(2)")),
    ];
    Worked { value, steps }
}

/// What the length of an anchorage or lap depends on; mm and N/mm².
#[derive(Clone, Copy, Debug)]
pub struct Bar {
    pub size: u32,
    pub fck: f64,
    pub sigma: f64,
    pub bond: Bond,
    /// cd of Figure 8.3: the least of half the clear gap and the covers.
    pub cd: f64,
    pub form: Form,
}

#[derive(Clone, Copy, Debug, PartialEq)]
pub enum Form {
    Straight,
    /// Bent, hooked or looped.
    Bent,
}

/// cd of Figure 8.3, mm: straight bars min(a/2, c1, c), others min(a/2, c1).
pub fn cd(clear_gap: f64, side_cover: f64, cover: f64, form: Form) -> f64 {
    let least = (clear_gap / 2.0).min(side_cover);
    if form == Form::Straight { least.min(cover) } else { least }
}

/// Basic length lb,rqd, mm (8.4.3(2)).
pub fn basic(bar: &Bar) -> Worked {
    let mut steps = Vec::new();
    let bond = fbd(bar.fck, bar.size, bar.bond);
    let value = f64::from(bar.size) / 4.0 * bar.sigma / bond.value;
    steps.extend(bond.steps);
    steps.push(
        Step::new(
            "basic length lb,rqd",
            format!("(φ/4)(σsd/fbd) = ({}/4)({}/{})", bar.size, num(bar.sigma, 1), num(bond.value, 3)),
            format!("{} mm", num(value, 1)),
        )
        .cited(ec2("8.4.3(2)")),
    );
    Worked { value, steps }
}

/// α1 (form of the bar) and α2 (cover), Table 8.2, bars in tension.
pub fn alphas(bar: &Bar) -> (f64, f64, Step) {
    let size = f64::from(bar.size);
    let (alpha1, reference) = match bar.form {
        Form::Straight => (1.0, size),
        Form::Bent => (if bar.cd > 3.0 * size { 0.7 } else { 1.0 }, 3.0 * size),
    };
    let alpha2 = (1.0 - 0.15 * (bar.cd - reference) / size).clamp(0.7, 1.0);
    let step = Step::new(
        "α1 and α2",
        format!("cd = {} mm; α2 = 1 - 0.15(cd - {})/φ within 0.7 to 1.0", num(bar.cd, 1), if bar.form == Form::Straight { "φ" } else { "3φ" }),
        format!("α1 = {}, α2 = {}; α3 = α4 = α5 = 1.0", num(alpha1, 2), num(alpha2, 3)),
    )
    .cited(ec2("Table 8.2"));
    (alpha1, alpha2, step)
}

/// Design anchorage length lbd, mm, not under lb,min (8.4.4(1)).
pub fn anchorage(bar: &Bar) -> Worked {
    let size = f64::from(bar.size);
    let basic = basic(bar);
    let (alpha1, alpha2, alphas) = alphas(bar);
    let least = (0.3 * basic.value).max(10.0 * size).max(100.0);
    let value = (alpha1 * alpha2 * basic.value).max(least);
    let mut steps = basic.steps;
    steps.push(alphas);
    steps.push(
        Step::new(
            "anchorage length lbd",
            format!(
                "α1 α2 lb,rqd = {} × {} × {}, not under lb,min = max(0.3 lb,rqd, 10φ, 100) = {}",
                num(alpha1, 2),
                num(alpha2, 3),
                num(basic.value, 1),
                num(least, 1)
            ),
            format!("{} mm", num(value, 1)),
        )
        .cited(ec2("8.4.4(1)")),
    );
    Worked { value, steps }
}

/// α6 for the share of bars lapped at one section, per cent (Table 8.3).
pub fn alpha6(share: u32) -> f64 {
    let rows = &tables().national.alpha6;
    rows.iter().find(|row| share <= row.share).or(rows.last()).map_or(1.5, |row| row.value)
}

/// Design lap length l0, mm, not under l0,min (8.7.3(1)); `least` is the office's minimum, mm.
pub fn lap(bar: &Bar, share: u32, least: f64) -> Worked {
    let size = f64::from(bar.size);
    let basic = basic(bar);
    let (alpha1, alpha2, alphas) = alphas(bar);
    let alpha6 = alpha6(share);
    let code_least = (0.3 * alpha6 * basic.value).max(15.0 * size).max(200.0);
    let value = (alpha1 * alpha2 * alpha6 * basic.value).max(code_least).max(least);
    let mut steps = basic.steps;
    steps.push(alphas);
    steps.push(Step::new("α6", format!("{share} % of bars lapped at one section"), num(alpha6, 3)).cited(ec2("Table 8.3")));
    steps.push(
        Step::new(
            "lap length l0",
            format!(
                "α1 α2 α6 lb,rqd = {} × {} × {} × {}, not under max(0.3 α6 lb,rqd, 15φ, 200) = {}{}",
                num(alpha1, 2),
                num(alpha2, 3),
                num(alpha6, 3),
                num(basic.value, 1),
                num(code_least, 1),
                if least > 0.0 { format!(" nor the office's {} mm", num(least, 1)) } else { String::new() }
            ),
            format!("{} mm", num(value, 1)),
        )
        .cited(ec2("8.7.3(1)")),
    );
    Worked { value, steps }
}

/// What a lap grows by where its bars stand apart: the clear gap over min(4φ, 50), mm (8.7.2(3)).
pub fn lap_excess(clear_gap: f64, size: u32) -> f64 {
    (clear_gap - (4.0 * f64::from(size)).min(50.0)).max(0.0)
}
