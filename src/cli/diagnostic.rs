//! Drawing a mistake: what is wrong, the line with a caret under the bytes, and what to write instead.
//!
//! Whatever a file holds, what is drawn is short and harmless: long lines and texts are cut, and no
//! character reaches the terminal that would do anything there but show.

use std::ops::Range;

use annotate_snippets::renderer::DecorStyle;
use annotate_snippets::{Annotation, AnnotationKind, Group, Level, Origin, Renderer, Snippet};
use anstream::adapter::strip_str;
use serde_json::{Value, json};

use crate::spec::{KeyPath, Location, Place, SpecError};

/// Most mistakes drawn of one spec.
const MOST_DRAWN: usize = 20;
/// Most characters of a line that are drawn.
const WIDEST_LINE: usize = 140;
/// Characters before the caret that are kept of a longer line.
const KEPT_BEFORE: usize = 50;
/// Most characters of a message, a note or a help: they may quote what was typed.
const LONGEST_TEXT: usize = 400;
/// Places with more lines between them are drawn as two excerpts.
const MOST_LINES_BETWEEN: usize = 100;
/// The renderer cuts nothing: lines are cut here, where their columns are known.
const WIDTH: usize = 4 * WIDEST_LINE;
/// What stands for a piece of a line or text that is left out.
const CUT: &str = "…";

/// Draws one mistake; ends with a line end.
#[must_use]
pub fn draw(error: &SpecError, colour: bool) -> String {
    let title = text(&error.to_string());
    let excerpts = excerpts(error);
    let is_said = |step: &String| stands_in(step, &title) || excerpts.iter().any(|e| stands_in(step, &e.source));
    let note = path_to(error).filter(|path| !path.0.iter().all(is_said)).map(|path| text(&format!("in `{path}`")));
    let help = error.help().map(|help| text(&help));

    let mut group = Group::with_title(Level::ERROR.primary_title(title.as_str()).id(error.code()));
    for excerpt in &excerpts {
        group = excerpt.add_to(group);
    }
    let messages = [(Level::NOTE, &note), (Level::HELP, &help)];
    group = group.elements(messages.into_iter().filter_map(|(level, text)| Some(level.message(text.as_ref()?))));
    let renderer = if colour { Renderer::styled() } else { Renderer::plain() };
    let drawn = renderer.decor_style(DecorStyle::Ascii).term_width(WIDTH).render(&[group]);
    // blanks at the ends of lines show nothing, and editors remove them from the messages kept as examples
    drawn.lines().filter(|line| !is_idle(line)).map(|line| format!("{}\n", line.trim_end())).collect()
}

/// The path of the block or value that the mistake stands in: a key that is underlined says its own name, and
/// an item of a list without a name is seen.
fn path_to(error: &SpecError) -> Option<KeyPath> {
    let Place { location, path } = error.at();
    let underlined = location.source.text.get(location.bytes.clone()).unwrap_or_default();
    let mut steps = path.0.as_slice();
    while let Some((last, before)) = steps.split_last() {
        if last != underlined.trim_matches(['"', '\'']) && !last.bytes().all(|byte| byte.is_ascii_digit()) {
            return Some(KeyPath(steps.to_vec()));
        }
        steps = before;
    }
    None
}

/// Whether a line is the mark that the renderer puts before an excerpt whose place was already said.
fn is_idle(line: &str) -> bool {
    strip_str(line).to_string().trim() == ":::"
}

/// Draws all mistakes of a spec, an empty line between them; of very many the first.
#[must_use]
pub fn draw_all(errors: &[SpecError], colour: bool) -> String {
    let drawn: Vec<String> = errors.iter().take(MOST_DRAWN).map(|error| draw(error, colour)).collect();
    let more = match errors.len().saturating_sub(MOST_DRAWN) {
        0 => String::new(),
        more => format!("\nand {more} more\n"),
    };
    drawn.join("\n") + &more
}

/// A mistake as data: `file`, `line`, `column`, `path`, `code`, `message`, `help`.
#[must_use]
pub fn to_json(error: &SpecError) -> Value {
    let at = error.at();
    json!({
        "file": at.location.source.name,
        "line": at.location.line(),
        "column": at.location.column(),
        "path": at.path.to_string(),
        "code": error.code(),
        "message": error.to_string(),
        "help": error.help(),
    })
}

/// Lines of one file with what is underlined in them.
struct Excerpt {
    name: String,
    /// Line and column of the mistake, counted from 1.
    position: (usize, usize),
    /// Number of the first line of `source`.
    first_line: usize,
    /// The lines as drawn; empty where the file has none.
    source: String,
    marks: Vec<Mark>,
}

/// Bytes of an excerpt that are underlined.
struct Mark {
    bytes: Range<usize>,
    label: String,
    kind: AnnotationKind,
}

/// The lines of a mistake: with those of its other place where both are near, else each by itself.
fn excerpts(error: &SpecError) -> Vec<Excerpt> {
    let at = &error.at().location;
    let own = |label| Excerpt::of(&[(at, label, AnnotationKind::Primary)]);
    let Some((other, other_label)) = error.second() else { return vec![own(error.label())] };
    let is_near = at.source == other.source && at.line().abs_diff(other.line()) <= MOST_LINES_BETWEEN;
    let (mine, context) = ((at, error.label(), AnnotationKind::Primary), (other, other_label, AnnotationKind::Context));
    if is_near { vec![Excerpt::of(&[mine, context])] } else { vec![Excerpt::of(&[mine]), Excerpt::of(&[context])] }
}

impl Excerpt {
    /// The lines from the first to the last of these places, which lie in one file; the first place is its own.
    fn of(places: &[(&Location, String, AnnotationKind)]) -> Self {
        let (own, ..) = &places[0];
        let mut lines: Vec<usize> = places.iter().map(|(location, ..)| location.line()).collect();
        lines.sort_unstable();
        let (first_line, last_line) = (lines[0], lines[lines.len() - 1]);
        let mut excerpt = Self {
            name: text(&own.source.name),
            position: (own.line(), own.column()),
            first_line,
            source: String::new(),
            marks: Vec::new(),
        };
        let start = line_start(own, first_line);
        let mut byte = start;
        let kept = own.source.text[start..].split_inclusive('\n').take(last_line - first_line + 1);
        for (number, line) in (first_line..).zip(kept) {
            let here = || places.iter().filter(|(location, ..)| location.line() == number);
            let spans: Vec<Range<usize>> = here().map(|(location, ..)| inside(location, byte, line)).collect();
            let cut = Line::around(line.trim_end_matches(['\n', '\r']), spans.first().map_or(0, |span| span.start));
            for ((_, label, kind), span) in here().zip(spans) {
                let bytes = excerpt.source.len() + cut.offset(span.start)..excerpt.source.len() + cut.offset(span.end);
                excerpt.marks.push(Mark { bytes, label: text(label), kind: *kind });
            }
            excerpt.source.push_str(&cut.drawn());
            excerpt.source.push('\n');
            byte += line.len();
        }
        excerpt
    }

    fn add_to<'a>(&'a self, group: Group<'a>) -> Group<'a> {
        let (line, column) = self.position;
        let origin = Origin::path(self.name.as_str()).line(line).char_column(column);
        if self.marks.is_empty() {
            return group.element(origin);
        }
        let annotation = |mark: &'a Mark| -> Annotation<'a> {
            let label = Some(mark.label.as_str()).filter(|label| !label.is_empty());
            mark.kind.span(mark.bytes.clone()).label(label)
        };
        let snippet = Snippet::source(self.source.as_str()).line_start(self.first_line);
        group.element(origin).element(snippet.annotations(self.marks.iter().map(annotation)))
    }
}

/// The byte at which a line of a place's file begins, or one before it.
fn line_start(location: &Location, line: usize) -> usize {
    let text = &location.source.text;
    text.split_inclusive('\n').take(line - 1).map(str::len).sum::<usize>().min(text.len())
}

/// The bytes of a place in the line it begins in, which itself begins at `byte`.
fn inside(location: &Location, byte: usize, line: &str) -> Range<usize> {
    let end = line.trim_end_matches(['\n', '\r']).len();
    let start = location.bytes.start.saturating_sub(byte).min(end);
    start..location.bytes.end.saturating_sub(byte).clamp(start, end)
}

/// A line of a file, and the piece of it that is drawn.
struct Line<'a> {
    text: &'a str,
    kept: Range<usize>,
}

impl<'a> Line<'a> {
    /// The whole line, or of a long one a piece around a byte.
    fn around(text: &'a str, byte: usize) -> Self {
        if text.chars().take(WIDEST_LINE + 1).count() <= WIDEST_LINE {
            return Self { text, kept: 0..text.len() };
        }
        let byte = text.floor_char_boundary(byte);
        let before = text[..byte].char_indices().rev().take(KEPT_BEFORE).last();
        let start = before.map_or(byte, |(start, _)| start);
        let end = text[start..].char_indices().nth(WIDEST_LINE).map_or(text.len(), |(length, _)| start + length);
        Self { text, kept: start..end }
    }

    fn before(&self) -> &'static str {
        if self.kept.start > 0 { CUT } else { "" }
    }

    fn drawn(&self) -> String {
        let after = if self.kept.end < self.text.len() { CUT } else { "" };
        format!("{}{}{after}", self.before(), harmless(&self.text[self.kept.clone()]))
    }

    /// Where a byte of the line stands in what is drawn.
    fn offset(&self, byte: usize) -> usize {
        let byte = self.text.floor_char_boundary(byte.clamp(self.kept.start, self.kept.end));
        self.before().len() + harmless(&self.text[self.kept.start..byte]).len()
    }
}

/// A text as it may stand in a message of one line.
fn text(typed: &str) -> String {
    match typed.char_indices().nth(LONGEST_TEXT) {
        Some((end, _)) => harmless(&typed[..end]) + CUT,
        None => harmless(typed),
    }
}

/// A text without characters that move the cursor, colour what follows or turn its direction.
fn harmless(typed: &str) -> String {
    let shown = |c: char| match c {
        '\t' => ' ',
        c if c.is_control() => char::REPLACEMENT_CHARACTER,
        '\u{200b}'..='\u{200f}' | '\u{2028}'..='\u{202e}' | '\u{2066}'..='\u{2069}' | '\u{feff}' => {
            char::REPLACEMENT_CHARACTER
        }
        c => c,
    };
    typed.chars().map(shown).collect()
}

/// Whether a step of a path stands in a text as a word of its own.
fn stands_in(step: &str, text: &str) -> bool {
    let is_part = |c: char| c.is_alphanumeric() || c == '_';
    text.match_indices(step).any(|(start, _)| {
        let (before, after) = (&text[..start], &text[start + step.len()..]);
        !before.ends_with(is_part) && !after.starts_with(is_part)
    })
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::spec::document::read_document;
    use crate::spec::{Origin as Giver, SourceText};
    use std::sync::Arc;

    fn unknown_key(text: &str, key: &str) -> SpecError {
        let start = text.find(key).expect("the key stands there");
        let source = Arc::new(SourceText { name: "plant.yaml".to_owned(), text: text.to_owned() });
        let location = Location { source, bytes: start..start + key.len() };
        let path = KeyPath(["sections", "tube", "wall", key].map(str::to_owned).to_vec());
        let nearest = Some("temperature".to_owned());
        let (block, key) = ("sections.tube.wall".to_owned(), key.to_owned());
        SpecError::UnknownKey { at: Place { location, path }, block, key, nearest, known: vec!["temperature"] }
    }

    fn mistakes(text: &str) -> Vec<SpecError> {
        read_document("plant.yaml", text.as_bytes(), Giver::File).expect_err("it is wrong")
    }

    #[test]
    fn the_caret_stands_under_the_bytes_and_the_help_below() {
        let text = "a: 1\nwall: {kind: jacket, temprature: 3 K}\n";
        let expected = "\
error[unknown_key]: `sections.tube.wall` has no key `temprature`
 --> plant.yaml:2:22
  |
2 | wall: {kind: jacket, temprature: 3 K}
  |                      ^^^^^^^^^^ unknown key
  |
  = help: do you mean `temperature`?
";
        assert_eq!(draw(&unknown_key(text, "temprature"), false), expected);
    }

    #[test]
    fn a_near_second_place_stands_in_the_same_excerpt() {
        let expected = "\
error[duplicate_key]: the key `a` stands here a second time
 --> plant.yaml:3:1
  |
1 | a: 1
  | - first given here
2 | b: 2
3 | a: 3
  | ^ again here
  |
  = help: leave one of the two out
";
        assert_eq!(draw_all(&mistakes("a: 1\nb: 2\na: 3\n"), false), expected);
    }

    #[test]
    fn a_far_second_place_has_its_own_excerpt() {
        let text = format!("a: 1\n{}a: 3\n", "# nothing\n".repeat(1000));
        let drawn = draw_all(&mistakes(&text), false);
        assert!(drawn.contains("plant.yaml:1002:1") && drawn.contains("plant.yaml:1:1"), "{drawn}");
        assert!(drawn.lines().count() < 20, "{drawn}");
    }

    #[test]
    fn a_long_line_is_cut_around_the_caret_and_keeps_its_column() {
        let text = format!(
            "{{a: [{}], é: 1, \u{1b}[31mtemprature: 1, b: [{}]}}",
            "1, ".repeat(900_000),
            "2, ".repeat(900_000)
        );
        let drawn = draw(&unknown_key(&text, "temprature"), false);
        let column = text.split("temprature").next().expect("it stands there").chars().count() + 1;
        assert!(drawn.contains(&format!("plant.yaml:1:{column}\n")), "{drawn}");
        assert!(drawn.lines().all(|line| line.chars().count() < 160), "{drawn}");
        let mut lines = drawn.lines().skip_while(|line| !line.starts_with("1 |"));
        let (line, carets) = (lines.next().unwrap_or_default(), lines.next().unwrap_or_default());
        let before = line.split("temprature").next().expect("it is drawn").chars().count();
        assert_eq!(carets.chars().take_while(|c| *c != '^').count(), before, "{drawn}");
        assert!(!drawn.contains('\u{1b}'), "{drawn}");
    }

    #[test]
    fn no_text_of_a_file_colours_the_terminal() {
        let text = "\"\u{1b}[31m\u{202e}key\": 1\nb: 2\n";
        let drawn = draw(&unknown_key(text, "\u{1b}[31m\u{202e}key"), false);
        assert!(drawn.chars().all(|c| c == '\n' || !c.is_control() && c != '\u{202e}'), "{drawn:?}");
        assert!(draw(&unknown_key("x: 1", "x"), true).contains('\u{1b}'), "colours were asked for");
    }

    #[test]
    fn of_very_many_mistakes_the_first_are_drawn() {
        let text: String = (0..27).map(|_| "a: 1\n").collect();
        let drawn = draw_all(&mistakes(&format!("b: 1\n{text}")), false);
        assert_eq!(drawn.matches("error[").count(), MOST_DRAWN);
        assert!(drawn.ends_with("\n\nand 6 more\n"), "{drawn}");
    }

    #[test]
    fn the_data_of_a_mistake_are_complete() {
        let data = to_json(&unknown_key("a: 1\nx: 2\n", "x"));
        let expected = json!({
            "file": "plant.yaml", "line": 2, "column": 1, "path": "sections.tube.wall.x", "code": "unknown_key",
            "message": "`sections.tube.wall` has no key `x`", "help": "do you mean `temperature`?",
        });
        assert_eq!(data, expected);
    }
}
