//! Random valid jobs, the same on every machine: a small xorshift and drafts that can be written, mirrored and shuffled.
//! Every project, slab and bar in here is invented.

/// Xorshift of 64 bits; equal seeds give equal jobs.
pub struct Dice(u64);

impl Dice {
    pub fn new(seed: u64) -> Dice {
        let mut dice = Dice(seed.wrapping_mul(0x9E37_79B9_7F4A_7C15) ^ 0x2545_F491_4F6C_DD1D | 1);
        for _ in 0..8 {
            dice.next();
        }
        dice
    }

    fn next(&mut self) -> u64 {
        self.0 ^= self.0 << 13;
        self.0 ^= self.0 >> 7;
        self.0 ^= self.0 << 17;
        self.0
    }

    /// A whole number from `low` to `high`.
    pub fn within(&mut self, low: u32, high: u32) -> u32 {
        low + (self.next() >> 16) as u32 % (high - low + 1)
    }

    /// A multiple of `step` from `low` to `high`.
    pub fn stepped(&mut self, low: u32, high: u32, step: u32) -> u32 {
        self.within(low.div_ceil(step), high / step) * step
    }

    pub fn one<T: Copy>(&mut self, of: &[T]) -> T {
        of[self.within(0, of.len() as u32 - 1) as usize]
    }

    /// True in `percent` of a hundred throws.
    pub fn chance(&mut self, percent: u32) -> bool {
        self.within(1, 100) <= percent
    }

    pub fn shuffle<T>(&mut self, items: &mut [T]) {
        for i in (1..items.len()).rev() {
            items.swap(i, self.within(0, i as u32) as usize);
        }
    }
}

pub type Bars = (u32, u32);

#[derive(Clone, Debug)]
pub struct Draft {
    pub concrete: &'static str,
    pub steel: &'static str,
    pub letter: &'static str,
    pub aggregate: u32,
    pub curtailment: &'static str,
    /// As it is written: a table's name in quotes, or a number.
    pub deduction: String,
    pub longest: u32,
    pub share: u32,
    pub least_lap: u32,
    pub slabs: Vec<Panel>,
}

/// One slab; lengths in mm.
#[derive(Clone, Debug)]
pub struct Panel {
    pub mark: String,
    pub members: u32,
    pub thickness: u32,
    pub width: u32,
    /// Bottom, top, side.
    pub cover: [u32; 3],
    pub load: [f64; 2],
    pub b2: Bars,
    pub t2: Bars,
    pub edges: [&'static str; 2],
    pub edge_width: [u32; 2],
    pub arrangement: &'static str,
    pub supports: Vec<Rest>,
    pub spans: Vec<Bay>,
}

#[derive(Clone, Debug)]
pub struct Rest {
    pub grid: String,
    pub kind: &'static str,
    pub width: u32,
    pub bearing: Option<u32>,
    pub top: Option<Bars>,
    pub required: Option<u32>,
    pub end_bar: Option<&'static str>,
    pub shear: Option<u32>,
}

#[derive(Clone, Debug)]
pub struct Bay {
    pub length: u32,
    pub bottom: Bars,
    pub required: Option<u32>,
    pub shear: Option<u32>,
}

fn area((size, spacing): Bars) -> f64 {
    std::f64::consts::PI / 4.0 * f64::from(size * size) * 1000.0 / f64::from(spacing)
}

/// Of the design area a share below what the bars give, in some slabs.
fn required(dice: &mut Dice, bars: Bars) -> Option<u32> {
    dice.chance(60).then(|| (area(bars) * f64::from(dice.within(70, 99)) / 100.0) as u32)
}

fn sizes(thickness: u32) -> &'static [u32] {
    match thickness {
        0..=139 => &[8, 10],
        140..=169 => &[8, 10, 12],
        170..=219 => &[10, 12, 16],
        220..=274 => &[10, 12, 16, 20],
        _ => &[12, 16, 20, 25],
    }
}

/// Bars that a designer might call in a slab this thick: the spacing within the zones of greatest moment.
fn main_bars(dice: &mut Dice, thickness: u32) -> Bars {
    let size = dice.one(sizes(thickness));
    let most = (2 * thickness).min(250);
    let least = (0.0017 * f64::from(thickness) * 1000.0 * f64::from(dice.within(70, 300)) / 100.0).max(1.0);
    let fits = (area((size, 1)) / least) as u32;
    let spacing = fits.clamp(75, most);
    (size, if dice.chance(85) { (spacing / 25 * 25).max(75) } else { spacing })
}

/// Any valid job: `seed` decides everything.
pub fn draft(seed: u64) -> Draft {
    let mut dice = Dice::new(seed);
    let d = &mut dice;
    let (steel, letter) = d.one(&[("B500A", "H"), ("B500B", "H"), ("B500C", "H"), ("B500A", "A"), ("B500B", "B"), ("B500C", "C")]);
    let deduction = match d.within(0, 3) {
        0 => "\"none\"".to_string(),
        1 => d.one(&["0", "10", "25"]).to_string(),
        _ => "\"bs8110-3.24\"".to_string(),
    };
    let slabs = if d.chance(90) { 1 } else { d.within(2, 3) };
    Draft {
        concrete: d.one(&["C20/25", "C25/30", "C28/35", "C30/37", "C32/40", "C35/45", "C40/50", "C45/55", "C50/60"]),
        steel,
        letter,
        aggregate: d.one(&[10, 20, 20, 20]),
        curtailment: d.one(&["one-way-50", "one-way-50", "bs8110-3-25"]),
        deduction,
        longest: d.one(&[12000, 12000, 12000, 9000, 6000, 6000]),
        share: d.one(&[25, 33, 50, 100, 100]),
        least_lap: if d.chance(80) { 0 } else { d.stepped(100, 800, 50) },
        slabs: (0..slabs).map(|i| panel(d, i)).collect(),
    }
}

fn panel(d: &mut Dice, index: u32) -> Panel {
    let thickness = d.stepped(120, 350, 5);
    let spans = if d.chance(80) { d.within(1, 5) } else { d.within(6, 20) };
    let is_equal = d.chance(40);
    let wide = if spans > 8 || d.chance(85) { 9000 } else { 40_000 };
    let shared = (d.stepped(1200, 9000, 25), main_bars(d, thickness));
    let bays: Vec<Bay> = (0..spans)
        .map(|_| {
            let (length, bottom) =
                if is_equal { shared } else { (if d.chance(70) { d.stepped(1200, 9000, 25) } else { d.within(1200, 9000) }, main_bars(d, thickness)) };
            let shear = d.chance(15).then(|| d.within(5, 40));
            Bay { length, bottom, required: required(d, bottom), shear }
        })
        .collect();
    let supports = (0..=spans).map(|j| rest(d, thickness, j, j == 0 || j == spans)).collect();
    let edges = [d.one(&["free", "free", "wall", "beam", "joint"]), d.one(&["free", "free", "wall", "beam", "joint"])];
    let edge_width = edges.map(|e| if e == "wall" || e == "beam" { d.stepped(100, 300, 5) } else { 0 });
    Panel {
        mark: format!("S{}", index + 1),
        members: if d.chance(70) { 1 } else { d.within(2, 5) },
        thickness,
        width: if d.chance(70) { d.stepped(2000, wide, 50) } else { d.within(2000, wide) },
        cover: [d.stepped(20, 40, 5), d.stepped(20, 40, 5), d.stepped(25, 40, 5)],
        load: [f64::from(d.within(40, 90)) / 10.0, f64::from(d.within(15, 50)) / 10.0],
        b2: distribution(d, thickness),
        t2: distribution(d, thickness),
        edges,
        edge_width,
        arrangement: d.one(&["auto", "auto", "reversed", "alternate", "full"]),
        supports,
        spans: bays,
    }
}

fn distribution(d: &mut Dice, thickness: u32) -> Bars {
    let size = if thickness < 150 {
        d.one(&[8, 10])
    } else if thickness < 250 {
        d.one(&[10, 10, 12])
    } else {
        d.one(&[10, 12, 16])
    };
    (size, d.stepped(150, (3 * thickness).min(400), 25))
}

fn rest(d: &mut Dice, thickness: u32, j: u32, is_end: bool) -> Rest {
    let kind = d.one(&["masonry", "wall", "beam"]);
    let width = match kind {
        "masonry" => d.one(&[102, 140, 215, 215, 327]),
        "wall" => d.stepped(150, 300, 5),
        _ => d.stepped(200, 600, 25),
    };
    let top = (!is_end || d.chance(50)).then(|| main_bars(d, thickness));
    Rest {
        grid: format!("G{}", j + 1),
        kind,
        width,
        bearing: (is_end && d.chance(50)).then(|| d.within(75.min(width), width)),
        top,
        required: top.and_then(|t| required(d, t)),
        end_bar: is_end.then(|| d.one(&["auto", "auto", "u-bar", "l-bar", "straight"])),
        shear: (is_end && d.chance(15)).then(|| d.within(5, 40)),
    }
}
