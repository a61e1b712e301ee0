//! Rules of the house that the compiler does not know (`docs/style.md`, `DEVELOPERS.md`).
//!
//! Each rule is a function from a file's path and text to what it finds there, so that a test beside the
//! rule can show that it catches a violation. Where this file has to name what it forbids, the word is put
//! together from parts: a rule must not find itself.

use std::path::Path;
use std::process::Command;

/// The pipeline: a folder of `src` uses only what stands before it. `simulate` is the file that joins the
/// stages up to the judgement.
const PIPELINE: [&str; 12] = [
    "units",
    "spec",
    "model",
    "discretise",
    "integrate",
    "results",
    "judge",
    "simulate",
    "study",
    "report",
    "export",
    "cli",
];

/// Most lines of a file in `src`: what is longer does more than one thing.
const MOST_LINES: usize = 500;

/// Names that say nothing of what a file holds.
const EMPTY_NAMES: [&str; 5] = ["utils", "helpers", "common", "types", "imp"];

/// The integrator's name, put together.
const INTEGRATOR: &str = concat!("diff", "sol");

/// Macros that print.
const PRINTING: [&str; 5] = ["println", "eprintln", "print", "eprint", "dbg"];

/// Macros that stand for work not done.
const UNFINISHED: [&str; 2] = ["todo", "unimplemented"];

/// First folders of paths that exist on one machine only.
const MACHINE_FOLDERS: [&str; 4] = ["work", "home", "root", "tmp"];

/// Words that do not belong, put together.
const FOREIGN_WORDS: [&str; 2] = [concat!("tran", "script"), concat!("lec", "ture")];

/// A check: path relative to the project with `/`, text; what is wrong, a line each.
type Check = fn(&str, &str) -> Vec<String>;

// ---- the rules

#[test]
fn folders_use_only_what_stands_before_them() {
    holds_everywhere(wrong_arrows);
}

#[test]
fn no_source_file_is_longer_than_500_lines() {
    holds_everywhere(too_long);
}

#[test]
fn only_the_folder_integrate_names_the_integrator() {
    holds_everywhere(integrator_named);
}

#[test]
fn only_the_command_line_prints() {
    holds_everywhere(prints);
}

#[test]
fn nothing_is_left_unfinished() {
    holds_everywhere(unfinished);
}

#[test]
fn every_file_says_by_its_name_what_it_holds() {
    holds_everywhere(empty_name);
}

#[test]
fn nothing_is_unwrapped_outside_tests() {
    holds_everywhere(unwraps);
}

#[test]
fn no_path_of_one_machine_is_written_down() {
    holds_everywhere(machine_paths);
}

#[test]
fn the_project_speaks_of_itself_alone() {
    holds_everywhere(foreign_words);
}

#[test]
fn the_law_on_the_style_page_is_the_one_in_the_code() {
    let page = std::fs::read_to_string(root().join("docs/style.md")).expect("the style page is there");
    let law = std::fs::read_to_string(root().join("src/model/rheology/vogel_fulcher_tammann.rs"));
    assert!(shows(&page, &law.expect("the law is there")), "bring the law in `docs/style.md`, section 2, up to date");
}

// ---- what each rule looks for

/// Imports and paths that lead to a later stage of the pipeline, or to nothing in it.
fn wrong_arrows(path: &str, text: &str) -> Vec<String> {
    let Some(module) = module_of(path) else { return Vec::new() };
    let Some(&own) = module.first() else { return Vec::new() }; // `lib.rs` and `main.rs` see everything
    let Some(rank) = rank(own) else { return vec![format!("`{own}` has no place in the pipeline")] };
    let code = code_of(text);
    let mut found = Vec::new();
    for (offset, target) in roots(&code, "crate") {
        let line = line_of(&code, offset);
        match self::rank(&target) {
            Some(other) if other > rank => found.push(format!("line {line}: `{own}` uses `{target}`")),
            Some(_) => {}
            None => found.push(format!("line {line}: `crate::{target}` is no folder: name the one that defines it")),
        }
    }
    for (offset, target) in roots(&code, "super") {
        let climbs = climbs_before(&code, offset) >= module.len();
        if climbs && self::rank(&target).is_some_and(|other| other > rank) {
            let line = line_of(&code, offset);
            found.push(format!("line {line}: `{own}` uses `{target}`"));
        }
    }
    found
}

fn too_long(path: &str, text: &str) -> Vec<String> {
    let n = text.lines().count();
    let long = is_source(path) && n > MOST_LINES;
    if long { vec![format!("{n} lines, {MOST_LINES} are allowed")] } else { Vec::new() }
}

fn integrator_named(path: &str, text: &str) -> Vec<String> {
    if !path.ends_with(".rs") || path.starts_with("src/integrate/") {
        return Vec::new();
    }
    let names = |line: &str| line.to_lowercase().contains(INTEGRATOR);
    lines_where(text, names, "names the integrator")
}

fn prints(path: &str, text: &str) -> Vec<String> {
    if !is_source(path) || path.starts_with("src/cli/") || path == "src/main.rs" {
        return Vec::new();
    }
    let code = code_of(text);
    let mut found = macros(&code, &PRINTING);
    for (offset, word) in words(&code) {
        if word == "stdout" || word == "stderr" {
            found.push(format!("line {}: takes `{word}`", line_of(&code, offset)));
        }
    }
    found
}

fn unfinished(path: &str, text: &str) -> Vec<String> {
    if path.ends_with(".rs") { macros(&code_of(text), &UNFINISHED) } else { Vec::new() }
}

fn empty_name(path: &str, _: &str) -> Vec<String> {
    if !path.ends_with(".rs") {
        return Vec::new();
    }
    let steps = path.split('/').map(|step| step.trim_end_matches(".rs"));
    steps.filter(|step| EMPTY_NAMES.contains(step)).map(|step| format!("`{step}` says nothing")).collect()
}

fn unwraps(path: &str, text: &str) -> Vec<String> {
    if !is_source(path) || path.ends_with("/tests.rs") {
        return Vec::new();
    }
    let code = without_tests(&code_of(text));
    let call = concat!(".unw", "rap()");
    code.match_indices(call).map(|(offset, _)| format!("line {}: `{call}`", line_of(&code, offset))).collect()
}

fn machine_paths(_: &str, text: &str) -> Vec<String> {
    lines_where(text, |line| MACHINE_FOLDERS.iter().any(|folder| starts_a_path(line, folder)), "names a machine's path")
}

fn foreign_words(_: &str, text: &str) -> Vec<String> {
    let has = |line: &str| {
        let line = line.to_lowercase();
        FOREIGN_WORDS.iter().any(|word| line.contains(word))
    };
    lines_where(text, has, "has a word that does not belong")
}

/// Whether the first Rust example of a page is this file up to its tests, but for layout.
fn shows(page: &str, file: &str) -> bool {
    let example = page.split("```rust").nth(1).and_then(|rest| rest.split("```").next()).unwrap_or_default();
    let law = file.split("#[cfg(test)]").next().unwrap_or_default();
    let bare = |text: &str| text.chars().filter(|c| !c.is_whitespace() && *c != ',').collect::<String>();
    !example.is_empty() && bare(example) == bare(law)
}

// ---- each rule catches a violation

#[test]
fn an_import_of_a_later_stage_is_found() {
    let found = |path: &str, text: &str| wrong_arrows(path, text).len();
    assert_eq!(found("src/model/flow.rs", "use crate::integrate::march::march;"), 1);
    assert_eq!(found("src/model/flow.rs", "use crate::{units::Dimension, judge::{self, margin}};"), 1);
    assert_eq!(found("src/model/flow.rs", "fn f() -> crate::report::Text { g() }"), 1);
    assert_eq!(found("src/model/flow.rs", "use super::super::results::Run;"), 1);
    assert_eq!(found("src/model/wall/mod.rs", "use super::super::cli;"), 1);
    assert_eq!(found("src/report/text.rs", "use crate::export::csv;"), 1);
    assert_eq!(found("src/simulate.rs", "use crate::cli::exit_code;"), 1);
    assert_eq!(found("src/judge/mod.rs", "use crate::simulate::Spec;"), 1);
    assert_eq!(found("src/odds/ends.rs", ""), 1);
    assert_eq!(found("src/model/flow.rs", "use crate::Run;"), 1, "a re-export hides where it stands");
}

#[test]
fn an_import_of_an_earlier_stage_is_allowed() {
    let found = |path: &str, text: &str| wrong_arrows(path, text);
    let nothing: [String; 0] = [];
    assert_eq!(found("src/model/flow.rs", "use crate::{spec::Block, units::{self, Dimension}};"), nothing);
    assert_eq!(found("src/model/wall/jacket.rs", "pub(in crate::model) use super::super::section;"), nothing);
    assert_eq!(found("src/spec/edit.rs", "mod tests { use super::super::document::read; }"), nothing);
    assert_eq!(
        found("src/model/flow.rs", "/// See [`crate::integrate`].\nconst A: &str = \"crate::cli::x\";"),
        nothing
    );
    assert_eq!(found("src/export/csv.rs", "use crate::report::columns;"), nothing);
    assert_eq!(found("src/study/sweep.rs", "use crate::simulate::run;"), nothing);
    assert_eq!(found("src/lib.rs", "pub use crate::cli::main;"), nothing);
}

#[test]
fn the_line_after_the_500th_is_found() {
    assert_eq!(too_long("src/a.rs", &"//\n".repeat(MOST_LINES + 1)).len(), 1);
    assert!(too_long("src/a.rs", &"//\n".repeat(MOST_LINES)).is_empty());
    assert!(too_long("tests/a.rs", &"//\n".repeat(MOST_LINES + 1)).is_empty());
}

#[test]
fn the_integrator_is_found_by_its_name() {
    let text = format!("use {INTEGRATOR}::Bdf;");
    assert_eq!(integrator_named("src/model/a.rs", &text).len(), 1);
    assert_eq!(integrator_named("benches/a.rs", &text.to_uppercase()).len(), 1);
    assert!(integrator_named("src/integrate/a.rs", &text).is_empty());
    assert!(integrator_named("docs/design/a.md", &text).is_empty());
}

#[test]
fn printing_is_found_in_the_library() {
    let found = |text: &str| prints("src/report/a.rs", text).len();
    for name in PRINTING {
        assert_eq!(found(&format!("fn f() {{ {name}!(\"x\"); }}")), 1, "{name}");
    }
    assert_eq!(found("let out = std::io::stdout();"), 1);
    assert_eq!(found("use std::io::{Write, stderr};"), 1);
    assert_eq!(found("// println!(\"x\") is for the command line\nlet print = 1; if print != 2 {}"), 0);
    assert!(prints("src/cli/a.rs", "println!()").is_empty());
}

#[test]
fn unfinished_work_is_found() {
    for name in UNFINISHED {
        assert_eq!(unfinished("tests/a.rs", &format!("fn f() {{ {name}!() }}")).len(), 1, "{name}");
    }
    assert!(unfinished("src/a.rs", "// todo!()\n/* unimplemented!() */").is_empty());
}

#[test]
fn a_name_that_says_nothing_is_found() {
    for name in EMPTY_NAMES {
        assert_eq!(empty_name(&format!("src/model/{name}.rs"), "").len(), 1, "{name}");
    }
    assert_eq!(empty_name("tests/common/mod.rs", "").len(), 1);
    assert!(empty_name("src/model/commons.rs", "").is_empty());
}

#[test]
fn an_unwrap_is_found_outside_tests_only() {
    let call = concat!("x.unw", "rap();");
    let test = format!("#[cfg(test)]\nmod tests {{ fn f() {{ {call} }} }}\n");
    assert_eq!(unwraps("src/a.rs", &format!("fn f() {{ {call} }}")).len(), 1);
    assert_eq!(
        unwraps("src/a.rs", &format!("{test}fn g() {{ {call} }}")),
        [format!("line 3: `{}`", &call[1..call.len() - 1])]
    );
    assert!(unwraps("src/a.rs", &test).is_empty());
    assert!(unwraps("tests/a.rs", call).is_empty());
    assert!(unwraps("src/a.rs", &format!("// {call}\nlet c = '\"'; let s = r#\"{call}\"#;")).is_empty());
}

#[test]
fn a_machine_path_is_found_in_any_text() {
    for folder in MACHINE_FOLDERS {
        assert_eq!(machine_paths("README.md", &format!("see `/{folder}/a/b`")).len(), 1, "{folder}");
        assert_eq!(machine_paths("a.yaml", &format!("dir: /{folder}")).len(), 1, "{folder}");
        let harmless = format!("a/{folder}, ../{folder}/x, https://a.org/{folder}, /{folder}shop");
        assert!(machine_paths("README.md", &harmless).is_empty(), "{folder}");
    }
}

#[test]
fn a_foreign_word_is_found_in_any_case() {
    for word in FOREIGN_WORDS {
        assert_eq!(foreign_words("README.md", &format!("a\nthe {}s", word.to_uppercase())).len(), 1, "{word}");
    }
    assert!(foreign_words("README.md", "architecture of a manuscript").is_empty());
}

#[test]
fn an_example_that_differs_from_its_file_is_found() {
    let page = "text\n```rust\nfn f(\n    a: u8,\n) {}\n```\n";
    assert!(shows(page, "fn f(a: u8) {}\n#[cfg(test)]\nmod tests {}"));
    assert!(!shows(page, "fn f(b: u8) {}"));
    assert!(!shows("no example", ""));
}

#[test]
fn comments_and_literals_are_no_code() {
    let text = "a /* b /* c */ d */ e // f\n\"g \\\" h\" 'i' '\\'' br#\"j \" k\"# l<'m> r#fn";
    let code = code_of(text);
    assert_eq!(code.split_whitespace().collect::<Vec<_>>(), ["a", "e", "l<'m>", "r#fn"]);
    assert_eq!(code.matches('\n').count(), text.matches('\n').count(), "lines keep their numbers");
}

// ---- reading the project

/// Holds a rule against every text of the project.
fn holds_everywhere(check: Check) {
    let mut found = Vec::new();
    for path in files() {
        let Ok(bytes) = std::fs::read(root().join(&path)) else { continue }; // deleted, not yet committed
        let Ok(text) = String::from_utf8(bytes) else { continue }; // a picture
        found.extend(check(&path, &text).into_iter().map(|what| format!("{path}: {what}")));
    }
    assert!(found.is_empty(), "\n{}\n", found.join("\n"));
}

fn root() -> &'static Path {
    Path::new(env!("CARGO_MANIFEST_DIR"))
}

/// Files of the project, tracked or about to be; in a copy without history, all but what is built.
fn files() -> Vec<String> {
    let git = Command::new("git")
        .args(["ls-files", "-z", "--cached", "--others", "--exclude-standard"])
        .current_dir(root())
        .output();
    let listed = match git {
        Ok(output) if output.status.success() => String::from_utf8_lossy(&output.stdout).into_owned(),
        _ => String::new(),
    };
    let mut files: Vec<String> = listed.split('\0').filter(|path| !path.is_empty()).map(str::to_owned).collect();
    if files.is_empty() {
        walk(root(), "", &mut files);
    }
    files.sort();
    files.dedup();
    assert!(files.iter().any(|path| path == "src/lib.rs"), "the project's files were not found");
    files
}

fn walk(folder: &Path, prefix: &str, files: &mut Vec<String>) {
    let entries = std::fs::read_dir(folder).expect("a folder of the project can be listed");
    for entry in entries.flatten() {
        let name = entry.file_name().to_string_lossy().into_owned();
        if name == "target" || name == ".git" {
            continue;
        }
        let path = format!("{prefix}{name}");
        match entry.file_type() {
            Ok(kind) if kind.is_dir() => walk(&entry.path(), &format!("{path}/"), files),
            Ok(kind) if kind.is_file() => files.push(path),
            _ => {}
        }
    }
}

// ---- reading a text

fn is_source(path: &str) -> bool {
    path.starts_with("src/") && path.ends_with(".rs")
}

/// The modules a file of `src` lies in, itself last: `model`, `wall`, `jacket`.
fn module_of(path: &str) -> Option<Vec<&str>> {
    let inside = path.strip_prefix("src/")?.strip_suffix(".rs")?;
    let mut module: Vec<&str> = inside.split('/').collect();
    let last = module.last().copied();
    if last == Some("mod") || module == ["lib"] || module == ["main"] {
        module.pop();
    }
    Some(module)
}

fn rank(name: &str) -> Option<usize> {
    PIPELINE.iter().position(|stage| *stage == name)
}

fn line_of(text: &str, offset: usize) -> usize {
    1 + text[..offset].matches('\n').count()
}

fn lines_where(text: &str, is_wrong: impl Fn(&str) -> bool, what: &str) -> Vec<String> {
    let numbered = text.lines().enumerate();
    numbered.filter(|(_, line)| is_wrong(line)).map(|(k, _)| format!("line {}: {what}", k + 1)).collect()
}

/// Whether an absolute path that begins with this folder stands in a line.
fn starts_a_path(line: &str, folder: &str) -> bool {
    let is_part = |c: char| c.is_alphanumeric() || c == '_' || c == '-';
    line.match_indices(&format!("/{folder}")).any(|(offset, step)| {
        let before = line[..offset].chars().next_back();
        let after = line[offset + step.len()..].chars().next();
        !before.is_some_and(|c| is_part(c) || ".~:})".contains(c)) && !after.is_some_and(is_part)
    })
}

fn is_word(c: char) -> bool {
    c.is_alphanumeric() || c == '_'
}

/// The words of a code, with their offsets.
fn words(code: &str) -> Vec<(usize, &str)> {
    let mut words = Vec::new();
    let mut start = None;
    for (offset, c) in code.char_indices().chain([(code.len(), ' ')]) {
        match (start, is_word(c)) {
            (None, true) => start = Some(offset),
            (Some(from), false) => {
                words.push((from, &code[from..offset]));
                start = None;
            }
            _ => {}
        }
    }
    words
}

/// Calls of macros.
fn macros(code: &str, names: &[&str]) -> Vec<String> {
    let called = |(offset, word): &(usize, &str)| {
        let after = &code[offset + word.len()..];
        names.contains(word) && after.starts_with('!') && !after.starts_with("!=")
    };
    let calls = words(code).into_iter().filter(called);
    calls.map(|(offset, word)| format!("line {}: `{word}!`", line_of(code, offset))).collect()
}

/// What follows `crate::` or a chain of `super::`: the first step, of each branch where several stand in braces.
fn roots(code: &str, from: &str) -> Vec<(usize, String)> {
    let mut roots = Vec::new();
    for (offset, word) in words(code) {
        if word != from {
            continue;
        }
        let Some(rest) = code[offset + word.len()..].trim_start().strip_prefix("::") else { continue };
        for branch in branches(rest.trim_start()) {
            let step: String = branch.trim_start().chars().take_while(|c| is_word(*c)).collect();
            if !step.is_empty() && step != "self" && step != "super" {
                roots.push((offset, step));
            }
        }
    }
    roots
}

/// `{a, b::{c, d}}` as `a` and `b::{c, d}`; anything else as it is.
fn branches(text: &str) -> Vec<&str> {
    let Some(inside) = text.strip_prefix('{') else { return vec![text] };
    let (mut depth, mut start, mut all) = (0_usize, 0, Vec::new());
    for (offset, c) in inside.char_indices() {
        match c {
            '{' => depth += 1,
            '}' if depth > 0 => depth -= 1,
            '}' => {
                all.push(&inside[start..offset]);
                break;
            }
            ',' if depth == 0 => {
                all.push(&inside[start..offset]);
                start = offset + 1;
            }
            _ => {}
        }
    }
    all
}

/// How many `super` a chain has, up to and with the one at an offset.
fn climbs_before(code: &str, offset: usize) -> usize {
    let mut before = code[..offset].trim_end();
    let mut climbs = 1;
    while let Some(rest) = before.strip_suffix("::").and_then(|rest| rest.trim_end().strip_suffix("super")) {
        climbs += 1;
        before = rest.trim_end();
    }
    climbs
}

/// The text with comments and literals blanked out, line for line.
fn code_of(text: &str) -> String {
    let chars: Vec<char> = text.chars().collect();
    let mut code = String::with_capacity(text.len());
    let mut at = 0;
    while at < chars.len() {
        let end = end_of_blank(&chars, at);
        if end == at {
            code.push(chars[at]);
            at += 1;
        } else {
            code.extend(chars[at..end].iter().map(|c| if *c == '\n' { '\n' } else { ' ' }));
            at = end;
        }
    }
    code
}

/// Where the comment or literal that begins here ends; here itself if none begins.
fn end_of_blank(chars: &[char], at: usize) -> usize {
    let begins_word = at == 0 || !is_word(chars[at - 1]);
    match &chars[at..] {
        ['/', '/', ..] => find(chars, at, |rest| rest[0] == '\n', 0),
        ['/', '*', ..] => end_of_block_comment(chars, at),
        ['"', ..] => end_of_quoted(chars, at, '"'),
        ['b' | 'c', '"', ..] if begins_word => end_of_quoted(chars, at + 1, '"'),
        ['b' | 'c', 'r', ..] if begins_word => end_of_raw(chars, at, at + 2),
        ['r', ..] if begins_word => end_of_raw(chars, at, at + 1),
        ['\'', '\\', ..] => end_of_quoted(chars, at, '\''),
        ['\'', _, '\'', ..] => at + 3,
        _ => at, // code, or the mark of a lifetime
    }
}

/// The first place from `at` on where a condition holds, plus `beyond`; the end where it never does.
fn find(chars: &[char], at: usize, holds: impl Fn(&[char]) -> bool, beyond: usize) -> usize {
    (at..chars.len()).find(|k| holds(&chars[*k..])).map_or(chars.len(), |k| k + beyond)
}

fn end_of_block_comment(chars: &[char], at: usize) -> usize {
    let (mut depth, mut k) = (0, at);
    while k < chars.len() {
        match &chars[k..] {
            ['/', '*', ..] => (depth, k) = (depth + 1, k + 2),
            ['*', '/', ..] if depth == 1 => return k + 2,
            ['*', '/', ..] => (depth, k) = (depth - 1, k + 2),
            _ => k += 1,
        }
    }
    k
}

fn end_of_quoted(chars: &[char], at: usize, quote: char) -> usize {
    let mut k = at + 1;
    while k < chars.len() && chars[k] != quote {
        k += if chars[k] == '\\' { 2 } else { 1 };
    }
    (k + 1).min(chars.len())
}

/// A raw literal whose hashes begin at `hashes`; `at` where what stands there is none.
fn end_of_raw(chars: &[char], at: usize, hashes: usize) -> usize {
    let n = chars[hashes.min(chars.len())..].iter().take_while(|c| **c == '#').count();
    if chars.get(hashes + n) != Some(&'"') {
        return at;
    }
    let ends = |rest: &[char]| rest[0] == '"' && rest.len() > n && rest[1..=n].iter().all(|c| *c == '#');
    find(chars, hashes + n + 1, ends, n + 1)
}

/// The code without what is compiled for tests only, line for line.
fn without_tests(code: &str) -> String {
    const MARK: &str = "#[cfg(test)]";
    let mut kept = String::with_capacity(code.len());
    let mut rest = code;
    while let Some(start) = rest.find(MARK) {
        let (before, item) = rest.split_at(start);
        let end = end_of_item(item);
        kept.push_str(before);
        kept.extend(item[..end].chars().map(|c| if c == '\n' { '\n' } else { ' ' }));
        rest = &item[end..];
    }
    kept + rest
}

/// Where the item ends that a text begins with: its semicolon, or the brace that closes its first one.
fn end_of_item(item: &str) -> usize {
    let mut depth = 0_usize;
    for (offset, c) in item.char_indices() {
        match c {
            ';' if depth == 0 => return offset + 1,
            '{' => depth += 1,
            '}' if depth <= 1 => return offset + 1,
            '}' => depth -= 1,
            _ => {}
        }
    }
    item.len()
}
