//! Compiles the proto files without protoc and keeps their descriptors for reflection.

use std::error::Error;
use std::path::{Path, PathBuf};

fn main() -> Result<(), Box<dyn Error>> {
    let root = Path::new(env!("CARGO_MANIFEST_DIR")).join("../../proto");
    println!("cargo::rerun-if-changed={}", root.display());
    let mut compiler = protox::Compiler::new([root.clone(), root.join("third_party")])?;
    compiler.include_imports(true).include_source_info(true);
    compiler.open_files(proto_files(&root.join("enolattice/v1"))?)?;
    let out = PathBuf::from(std::env::var("OUT_DIR")?);
    std::fs::write(
        out.join("enolattice.v1.bin"),
        compiler.encode_file_descriptor_set(),
    )?;
    tonic_prost_build::configure().compile_fds(compiler.file_descriptor_set())?;
    Ok(())
}

fn proto_files(folder: &Path) -> std::io::Result<Vec<PathBuf>> {
    let mut files = Vec::new();
    for entry in std::fs::read_dir(folder)? {
        let path = entry?.path();
        if path
            .extension()
            .is_some_and(|extension| extension == "proto")
        {
            files.push(path);
        }
    }
    files.sort();
    Ok(files)
}
