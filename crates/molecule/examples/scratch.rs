use enolattice_molecule::*;
fn main() {
    let t = std::fs::read_to_string(std::env::args().nth(1).unwrap()).unwrap();
    let (mut ok, mut bad) = (0, 0);
    let start = std::time::Instant::now();
    for l in t.lines() {
        let f: Vec<&str> = l.split('\t').collect();
        match Molecule::parse(f[0]) {
            Err(e) => {
                bad += 1;
                println!("ERR {} {e}", f[0]);
            }
            Ok(m) => {
                let mut r: Vec<usize> = m.rings().iter().map(|r| r.len()).collect();
                r.sort();
                let r = r
                    .iter()
                    .map(|x| x.to_string())
                    .collect::<Vec<_>>()
                    .join(",");
                let nc = m.symmetry_classes().iter().max().unwrap() + 1;
                if m.canonical() == f[1]
                    && m.canonical_flat() == f[2]
                    && m.formula() == f[3]
                    && format!("{:.6}", m.exact_mass()) == f[4]
                    && (m.molar_mass() - f[5].parse::<f64>().unwrap()).abs() < 0.002
                    && r == f[6]
                    && nc.to_string() == f[7]
                {
                    ok += 1
                } else {
                    bad += 1;
                    println!(
                        "DIFF {:?} got {} {} {} {} {} {} {}",
                        f,
                        m.canonical(),
                        m.canonical_flat(),
                        m.formula(),
                        m.exact_mass(),
                        m.molar_mass(),
                        r,
                        nc
                    );
                }
            }
        }
    }
    println!("ok {ok} bad {bad} {:?}", start.elapsed());
}
