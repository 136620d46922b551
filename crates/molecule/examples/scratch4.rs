use enolattice_molecule::*;
fn main(){ // substrate \t site \t electrophile
  for l in std::io::stdin().lines(){ let l=l.unwrap(); let f:Vec<&str>=l.split('\t').collect();
   let r=(||->Result<String,String>{ let s=Molecule::parse(f[0]).map_err(|e|format!("SUB {e}"))?; let e=Molecule::parse(f[2]).map_err(|e|format!("EL {e}"))?;
     let g=recognise(&e).map_err(|e|format!("REC {e}"))?; let p=c_product(&s,f[1].parse().unwrap(),&e,&g).map_err(|e|format!("PROD {e}"))?;
     let d=dehydrated(&p).map_err(|e|e.to_string())?.map(|m|m.canonical_flat()).unwrap_or_default();
     let o=o_product(&s,f[1].parse().unwrap(),&e,&g).map_err(|e|format!("OPROD {e}"))?.map(|m|m.molecule.canonical_flat()).unwrap_or_default();
     Ok(format!("{}\t{}\t{}\t{}",p.molecule.canonical_flat(),p.molecule.canonical(),d,o)) })();
   println!("{}",match r{Ok(x)=>x,Err(e)=>format!("!{e}")}); } }
