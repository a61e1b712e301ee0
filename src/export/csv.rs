//! Tidy tables as CSV: one header line, the SI unit in a column's name, one observation a row.
//!
//! `.` is the decimal sign and `,` parts the cells; lines end with `\n`; numbers have the digits it takes to read
//! them back; what was not computed is an empty cell.

use crate::results::axial::Table;
use crate::results::{Figure, Value};
use crate::units;

/// First columns of a table of profiles, by which a file of ours is known again.
pub const PROFILE_BEGINNING: &str = "section,z_m,";
/// Header of the table of quantities.
pub const QUANTITIES_HEADER: &str = "quantity,value,unit,reason";

/// A table of profiles: the section, then a column a quantity.
#[must_use]
pub fn profiles(table: &Table) -> Vec<u8> {
    let column = |(name, dimension): &(String, units::Dimension)| match units::column_suffix(*dimension).as_str() {
        "" => name.clone(),
        suffix => format!("{name}_{suffix}"),
    };
    let mut rows = Rows::new();
    rows.words(std::iter::once("section".to_owned()).chain(table.columns.iter().map(column)));
    for (section, values) in &table.rows {
        rows.word(section);
        values.iter().for_each(|value| rows.number(*value));
        rows.end();
    }
    rows.into_bytes()
}

/// Every quantity of a run: name, value, SI unit, and why it is missing where it is.
#[must_use]
pub fn quantities(figures: &[Figure]) -> Vec<u8> {
    let mut rows = Rows::new();
    rows.words(QUANTITIES_HEADER.split(',').map(str::to_owned));
    for figure in figures {
        rows.word(&figure.name);
        let reason = match &figure.value {
            Value::Number(value) => {
                rows.number(Some(*value));
                ""
            }
            Value::Word(word) => {
                rows.word(word);
                ""
            }
            Value::Missing(reason) => {
                rows.number(None);
                reason
            }
        };
        rows.word(&units::symbol(figure.dimension));
        rows.word(reason);
        rows.end();
    }
    rows.into_bytes()
}

/// Rows of a file on their way into memory, cell by cell.
struct Rows {
    writer: ::csv::Writer<Vec<u8>>,
    /// Room for one number.
    room: Vec<u8>,
}

impl Rows {
    fn new() -> Self {
        let mut builder = ::csv::WriterBuilder::new();
        let writer = builder.terminator(::csv::Terminator::Any(b'\n')).from_writer(Vec::new());
        Self { writer, room: Vec::new() }
    }

    fn word(&mut self, word: &str) {
        self.writer.write_field(word).expect("memory takes all that is written");
    }

    /// A number in the fewest digits that read back as the same number; empty for none.
    fn number(&mut self, value: Option<f64>) {
        self.room.clear();
        if let Some(value) = value.filter(|value| value.is_finite()) {
            let value = if value == 0.0 { 0.0 } else { value }; // no minus before nothing
            serde_json::to_writer(&mut self.room, &value).expect("a finite number can be written");
        }
        let digits = self.room.strip_suffix(b".0").unwrap_or(&self.room);
        self.writer.write_field(digits).expect("memory takes all that is written");
    }

    fn end(&mut self) {
        self.writer.write_record(None::<&[u8]>).expect("rows of one table are of one length");
    }

    fn words(&mut self, words: impl Iterator<Item = String>) {
        words.for_each(|word| self.word(&word));
        self.end();
    }

    fn into_bytes(self) -> Vec<u8> {
        self.writer.into_inner().expect("memory takes all that is written")
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::units::Dimension;

    fn cell(value: Option<f64>) -> String {
        let mut rows = Rows::new();
        rows.word("");
        rows.number(value);
        rows.end();
        let text = String::from_utf8(rows.into_bytes()).expect("it is UTF-8");
        text.trim_end().trim_start_matches("\"\"").trim_start_matches(',').to_owned()
    }

    #[test]
    fn every_number_reads_back_as_itself() {
        for value in [0.1, -0.0, 1.0 / 3.0, 1e-300, 6.022e23, 358.15, 1e-5, 9.999_999e-6, -2.5e17, f64::MIN_POSITIVE] {
            assert_eq!(cell(Some(value)).parse::<f64>().ok(), Some(value));
        }
        assert_eq!(cell(Some(358.15)), "358.15");
        assert_eq!(cell(Some(40.0)), "40");
        assert_eq!(cell(Some(-0.0)), "0");
        assert_eq!(cell(Some(2.5e-9)), "2.5e-9");
    }

    #[test]
    fn what_was_not_computed_is_an_empty_cell() {
        for value in [None, Some(f64::NAN), Some(f64::INFINITY)] {
            assert_eq!(cell(value), "");
        }
    }

    #[test]
    fn a_table_has_one_header_line_with_units() {
        let columns = vec![("z".to_owned(), Dimension::LENGTH), ("conversion".to_owned(), Dimension::RATIO)];
        let rows = vec![("tube".to_owned(), vec![Some(0.0), None]), ("tube".to_owned(), vec![Some(0.5), Some(0.25)])];
        let text = String::from_utf8(profiles(&Table { columns, rows })).expect("it is UTF-8");
        assert_eq!(text, "section,z_m,conversion\ntube,0,\ntube,0.5,0.25\n");
        assert!(text.starts_with(PROFILE_BEGINNING));
    }

    #[test]
    fn quantities_are_listed_with_unit_or_reason() {
        let figure = |name: &str, dimension, value| Figure { name: name.to_owned(), dimension, value };
        let figures = [
            figure("outlet.temperature", Dimension::TEMPERATURE, Value::Number(358.15)),
            figure("ended", Dimension::RATIO, Value::Word("outlet".to_owned())),
            figure("pressure_drop", Dimension::PRESSURE, Value::Missing("a, \"b\"".to_owned())),
        ];
        let text = String::from_utf8(quantities(&figures)).expect("it is UTF-8");
        let wanted = "quantity,value,unit,reason\noutlet.temperature,358.15,K,\nended,outlet,,\n\
                      pressure_drop,,Pa,\"a, \"\"b\"\"\"\n";
        assert_eq!(text, wanted);
    }
}
