//! Every example runs.

#[path = "../examples/jacket_scan.rs"]
mod jacket_scan;

#[test]
fn jacket_scan_runs() {
    jacket_scan::main().expect("the example runs from the project's root");
}
