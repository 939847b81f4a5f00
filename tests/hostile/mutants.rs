//! The samples, damaged at random places from a fixed seed: whatever comes out gets an answer.

use super::{Answer, bounded};

const SAMPLES: [&str; 4] = [
    include_str!("../../samples/mill-store.toml"),
    include_str!("../../samples/ferry-hall.toml"),
    include_str!("../../samples/harbour-shed.toml"),
    include_str!("../../samples/orchard-annexe.toml"),
];

/// Whole numbers that are the same on every run (a multiplier and a mix of the high bits).
struct Numbers(u64);

impl Numbers {
    fn below(&mut self, most: usize) -> usize {
        self.0 = self.0.wrapping_mul(6_364_136_223_846_793_005).wrapping_add(1_442_695_040_888_963_407);
        ((self.0 ^ (self.0 >> 29)) >> 20) as usize % most.max(1)
    }
}

/// Letters that mean something in a job file, and some that never should be there.
const SPICE: [&str; 24] =
    ["\"", "'", "=", "[", "]", "[[", "{", "}", ".", ",", "#", "-", "\\", "\n", "\r", "\t", "\0", "0", "9", "e9", "nan", "\u{1F9F1}", "\u{301}", "\"\"\""];

fn damage_bytes(bytes: &mut Vec<u8>, numbers: &mut Numbers) {
    let at = numbers.below(bytes.len());
    let end = (at + 1 + numbers.below(12)).min(bytes.len());
    match numbers.below(5) {
        0 => drop(bytes.drain(at..end)),
        1 => drop(bytes.splice(at..at, SPICE[numbers.below(SPICE.len())].bytes())),
        2 => {
            let copy = bytes[at..end].to_vec();
            bytes.splice(at..at, copy);
        }
        3 => bytes[at] = numbers.below(256) as u8,
        // A figure for a figure: the file stays sound, the design does not.
        _ => {
            if let Some(figure) = bytes[at..].iter_mut().find(|b| b.is_ascii_digit()) {
                *figure = b'0' + numbers.below(10) as u8;
            }
        }
    }
}

fn damage_lines(bytes: &mut Vec<u8>, numbers: &mut Numbers) {
    let mut lines: Vec<Vec<u8>> = bytes.split(|b| *b == b'\n').map(<[u8]>::to_vec).collect();
    let (a, b) = (numbers.below(lines.len()), numbers.below(lines.len()));
    match numbers.below(4) {
        0 => drop(lines.remove(a)),
        1 => lines.insert(b, lines[a].clone()),
        2 => lines.swap(a, b),
        _ => drop(lines.drain(a.min(b)..a.max(b))),
    }
    *bytes = lines.join(&b'\n');
}

fn mutant(seed: u64) -> Vec<u8> {
    let mut numbers = Numbers(seed.wrapping_mul(0x9E37_79B9_7F4A_7C15));
    numbers.below(2);
    let mut bytes = SAMPLES[seed as usize % SAMPLES.len()].as_bytes().to_vec();
    for _ in 0..=numbers.below(3) {
        if numbers.below(3) == 0 { damage_lines(&mut bytes, &mut numbers) } else { damage_bytes(&mut bytes, &mut numbers) }
    }
    bytes
}

#[test]
fn damaged_samples_get_an_answer() {
    let (mut jobs, mut faulty) = (0, 0);
    for seed in 0..2400 {
        match bounded(&format!("mutant {seed}"), mutant(seed)) {
            Answer::Job(_) => jobs += 1,
            Answer::Faults(_) => faulty += 1,
        }
    }
    // Both ways through the program must have been tried.
    assert!(jobs > 200 && faulty > 1000, "{jobs} jobs, {faulty} faulty");
}

#[test]
fn samples_cut_off_anywhere_get_an_answer() {
    for (which, sample) in SAMPLES.iter().enumerate() {
        for end in (0..sample.len()).step_by(7) {
            bounded(&format!("sample {which} cut at {end}"), sample.as_bytes()[..end].to_vec());
        }
    }
}
