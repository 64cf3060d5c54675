//! Makes cargo see new and changed rules, which are compiled in.

fn main() {
    println!("cargo:rerun-if-changed=rules");
}
