//! Tells cargo that the embedded rule base is an input: `include_dir` alone misses files that are added.

fn main() {
    println!("cargo::rerun-if-changed=knowledge");
}
