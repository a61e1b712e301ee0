//! The page that lists the check values and the tests that pose them.

use std::path::Path;

/// Texts of all Rust files below a folder.
fn sources(folder: &Path, found: &mut String) {
    for entry in
        std::fs::read_dir(folder).expect("the folder can be listed").map(|entry| entry.expect("it can be read"))
    {
        let path = entry.path();
        if path.is_dir() {
            sources(&path, found);
        } else if path.extension().is_some_and(|extension| extension == "rs") {
            found.push_str(&std::fs::read_to_string(&path).expect("a source is a text"));
        }
    }
}

#[test]
fn every_test_that_the_page_of_checks_names_exists() {
    let root = Path::new(env!("CARGO_MANIFEST_DIR"));
    let page = std::fs::read_to_string(root.join("docs/checks.md")).expect("the page is there");
    let mut code = String::new();
    for folder in ["src", "tests"] {
        sources(&root.join(folder), &mut code);
    }
    let mut missing = Vec::new();
    for name in page.split('`').skip(1).step_by(2) {
        let is_path = name.contains('/') && name.ends_with(".rs");
        let is_test = name.matches('_').count() > 2 && name.chars().all(|c| c.is_ascii_lowercase() || c == '_');
        if is_path && !root.join(name).exists() || is_test && !code.contains(&format!("fn {name}(")) {
            missing.push(name);
        }
    }
    assert!(missing.is_empty(), "docs/checks.md names what does not exist: {missing:?}");
    assert!(page.matches("tests/").count() > 20, "the page names tests");
}
