use enolattice_molecule::*;
fn main() {
    for l in std::io::stdin().lines() {
        let l = l.unwrap();
        let s = l.split_whitespace().next().unwrap_or("");
        if s.is_empty() {
            continue;
        }
        match Molecule::parse(s) {
            Err(e) => println!("{s:40} PARSE {e}"),
            Ok(m) => match recognise(&m) {
                Err(e) => println!("{s:40} ERR {e}"),
                Ok(g) => println!(
                    "{s:40} {:?} @{} lv {:?} +{}",
                    g.kind, g.carbon, g.leaving_atom, g.further_positions
                ),
            },
        }
    }
}
