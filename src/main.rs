use slabwright::*;
fn main() {
    for path in std::env::args().skip(1) {
        let bytes = std::fs::read(&path).unwrap();
        let r = job::read(&bytes, &|_| Err("no".into()));
        print!("{}", diagnose::render(&r.faults, &r.source, &path, false));
        let Some(job) = r.job else { continue };
        let m = place::place(&job, plan::plan(&job));
        for s in &m.slabs {
            for r in &s.reasons { println!("{}: {}", r.address, r.text); }
            for b in &s.bars {
                println!("{} {}{} sh{} {:?} L{} {} {} n{} lap{:.0} {}", b.mark, b.letter, b.size, b.shape, b.dims, b.length, b.layer.name(), b.role.name(), b.each(), b.lap_mm, b.sets.first().map(|x| format!("{:?} step {:?} x{}", x.axis, x.step, x.count)).unwrap());
            }
        }
        for c in audit::audit(&job, &m).concat() { if c.verdict != audit::Verdict::Pass { println!("{:?}", c); } }
        println!("total {}", m.total_kg());
    }
}
