//! A page of plain text: headings, wrapped paragraphs, aligned tables, never wider than a terminal of 80.

/// Columns of a page.
pub const WIDTH: usize = 80;
/// Blanks before what stands under a heading.
const INDENT: usize = 2;
/// Blanks between two columns of a table: wider than the one between a number and its unit.
const GUTTER: usize = 3;
/// Blanks between two columns where there is little room.
pub const NARROW: usize = 2;
/// A blank that is no place to break a line.
const GLUE: char = '\u{a0}';

/// Which edge a column keeps.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Edge {
    /// Words.
    Left,
    /// Numbers.
    Right,
}

/// A page that grows downwards.
#[derive(Clone, Debug, Default)]
pub struct Page {
    text: String,
}

impl Page {
    /// The page as one text, a line break at its end.
    #[must_use]
    pub fn into_text(self) -> String {
        self.text
    }

    /// The title of the page, underlined.
    pub fn title(&mut self, title: &str) {
        let from = self.text.len();
        self.hanging("", "", title);
        let longest = self.text[from..].lines().map(length).max().unwrap_or_default();
        self.line(&"=".repeat(longest));
    }

    /// A heading, a blank line before it.
    pub fn heading(&mut self, heading: &str) {
        self.blank();
        self.hanging("", "", heading);
    }

    /// A paragraph under a heading.
    pub fn paragraph(&mut self, words: &str) {
        let indent = " ".repeat(INDENT);
        self.hanging(&indent, &indent, words);
    }

    /// A paragraph under an item of a heading, further in.
    pub fn remark(&mut self, words: &str) {
        let indent = " ".repeat(INDENT + 4);
        self.hanging(&indent, &indent, words);
    }

    /// An item of a list: what it is about, then words that keep clear of it where they need more lines.
    pub fn item(&mut self, label: &str, words: &str) {
        let (first, rest) = (" ".repeat(INDENT), " ".repeat(INDENT + 4));
        self.hanging(&first, &rest, &format!("{label}: {words}"));
    }

    /// Items with their labels in a column of their own; words that need more lines keep clear of it.
    pub fn labelled(&mut self, items: &[(String, String)]) {
        let widest = items.iter().map(|(label, _)| length(label)).max().unwrap_or_default();
        let rest = " ".repeat(INDENT + widest + GUTTER);
        for (label, words) in items {
            let blanks = " ".repeat(widest - length(label) + GUTTER);
            self.hanging(&format!("{}{label}{blanks}", " ".repeat(INDENT)), &rest, words);
        }
    }

    /// Rows in aligned columns; an empty table leaves nothing.
    pub fn table(&mut self, edges: &[Edge], rows: &[Vec<String>]) {
        aligned(edges, rows, GUTTER).iter().for_each(|line| self.line(line));
    }

    /// A blank line, unless the page is empty or ends with one.
    pub fn blank(&mut self) {
        if !self.text.is_empty() && !self.text.ends_with("\n\n") {
            self.text.push('\n');
        }
    }

    /// One line as it is, without blanks at its end; signs that would steer a terminal become blanks.
    pub fn line(&mut self, line: &str) {
        let plain = |c: char| if c == GLUE || c.is_control() { ' ' } else { c };
        let line: String = line.chars().map(plain).collect();
        self.text.push_str(line.trim_end());
        self.text.push('\n');
    }

    /// Words in lines no wider than the page; one that is wider has a line of its own.
    fn hanging(&mut self, first: &str, rest: &str, words: &str) {
        let mut line = first.to_owned();
        let mut empty = true;
        for word in words.split([' ', '\n', '\t']).filter(|word| !word.is_empty()) {
            if !empty && length(&line) + 1 + length(word) > WIDTH {
                self.line(&line);
                line = rest.to_owned();
                empty = true;
            }
            if !empty {
                line.push(' ');
            }
            line.push_str(word);
            empty = false;
        }
        self.line(&line);
    }
}

/// Rows as lines with aligned columns, set in as what stands under a heading; columns without a letter are left out.
///
/// A row may have fewer cells than there are columns.
#[must_use]
pub fn aligned(edges: &[Edge], rows: &[Vec<String>], gutter: usize) -> Vec<String> {
    let width = |k: usize| rows.iter().filter_map(|row| row.get(k)).map(|cell| length(cell)).max();
    let widths: Vec<usize> = (0..edges.len()).map(|k| width(k).unwrap_or_default()).collect();
    let line = |row: &Vec<String>| {
        let mut line = " ".repeat(INDENT);
        for ((cell, edge), width) in row.iter().zip(edges).zip(&widths).filter(|(_, width)| **width > 0) {
            if length(&line) > INDENT {
                line.push_str(&" ".repeat(gutter));
            }
            let blanks = " ".repeat(width - length(cell));
            match edge {
                Edge::Left => line.extend([cell.as_str(), &blanks]),
                Edge::Right => line.extend([blanks.as_str(), cell]),
            }
        }
        line.trim_end().to_owned()
    };
    rows.iter().map(line).collect()
}

/// Letters of a text.
#[must_use]
pub fn length(text: &str) -> usize {
    text.chars().count()
}

/// A text whose blanks are no place to break a line: a number and its unit.
#[must_use]
pub fn glued(text: &str) -> String {
    text.replace(' ', &GLUE.to_string())
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn no_line_is_wider_than_the_page_unless_a_word_is() {
        let mut page = Page::default();
        page.paragraph(&"a hundred words about nothing at all ".repeat(20));
        page.item("law_range", &"and of these too ".repeat(20));
        let text = page.into_text();
        assert!(text.lines().all(|line| length(line) <= WIDTH), "{text}");
        assert!(text.lines().filter(|line| length(line) > WIDTH - 12).count() > 5, "{text}");
    }

    #[test]
    fn a_number_stays_with_its_unit() {
        let mut page = Page::default();
        page.paragraph(&format!("{} {}", "x".repeat(WIDTH - 5), glued("3 mm")));
        assert_eq!(page.into_text().lines().last(), Some("  3 mm"));
    }

    #[test]
    fn labels_keep_a_column_of_their_own() {
        let mut page = Page::default();
        let items =
            [("a", "one ".repeat(30)), ("label", "two".to_owned())].map(|(label, words)| (label.to_owned(), words));
        page.labelled(&items);
        let text = page.into_text();
        let further = text.lines().skip(1).filter(|line| !line.starts_with("  label"));
        assert!(further.clone().count() > 0 && further.clone().all(|line| line.starts_with("          one")), "{text}");
        assert!(text.ends_with("\n  label   two\n"), "{text}");
    }

    #[test]
    fn columns_are_aligned_and_empty_ones_left_out() {
        let mut page = Page::default();
        let rows = [["a", "", "1 m"], ["bcd", "", "20 m"]].map(|row| row.map(str::to_owned).to_vec());
        page.table(&[Edge::Left, Edge::Left, Edge::Right], &rows);
        assert_eq!(page.into_text(), "  a      1 m\n  bcd   20 m\n");
    }

    #[test]
    fn signs_that_steer_a_terminal_are_not_passed_on() {
        let mut page = Page::default();
        page.title("a\u{1b}[31mred\u{7} title");
        assert_eq!(page.into_text().lines().next(), Some("a [31mred  title"));
    }
}
