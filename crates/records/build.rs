//! Compiles the schema of the Open Reaction Database without protoc.

use std::error::Error;
use std::path::{Path, PathBuf};

fn main() -> Result<(), Box<dyn Error>> {
    let root = Path::new(env!("CARGO_MANIFEST_DIR")).join("../../proto/third_party");
    let schema = root.join("ord-schema");
    println!("cargo::rerun-if-changed={}", schema.display());
    let mut compiler = protox::Compiler::new([root])?;
    compiler.include_imports(true);
    compiler.open_file(schema.join("proto/dataset.proto"))?;
    let out = PathBuf::from(std::env::var("OUT_DIR")?);
    std::fs::write(out.join("ord.bin"), compiler.encode_file_descriptor_set())?;
    prost_build::Config::new()
        // the same plan gives the same bytes: keys in their order
        .btree_map(["."])
        .disable_comments(["."])
        .compile_fds(compiler.file_descriptor_set())?;
    Ok(())
}
