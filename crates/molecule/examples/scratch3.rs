use enolattice_molecule::*;
fn main() {
    let t = std::fs::read_to_string(std::env::args().nth(1).unwrap()).unwrap();
    for l in t.lines().filter(|l| !l.starts_with('#')) {
        let f: Vec<&str> = l.split('\t').collect();
        let s = std::time::Instant::now();
        let m = Molecule::parse(f[0]);
        let t1 = s.elapsed();
        let r = match &m {
            Ok(m) => {
                let _ = m.canonical_flat();
                format!("ok {} rec {:?}", m.rings().len(), recognise(m).is_ok())
            }
            Err(e) => format!("{e}").chars().take(100).collect(),
        };
        println!("{:14} {:?} {:?} {}", f[1], t1, s.elapsed(), r);
    }
}
