//! Tables of the report: every number keeps its full value beside its text, so that columns sort and tests can compare.
use std::fmt::Write;

use crate::output::svg::draw::escape;

/// One cell.
#[derive(Debug, Clone, Default, PartialEq)]
pub struct Cell {
    /// What is read.
    pub text: String,
    /// Full value of a number.
    pub value: Option<f64>,
}

impl Cell {
    /// A text.
    pub fn text(text: impl Into<String>) -> Self {
        Self { text: text.into(), value: None }
    }

    /// A number with the text that shows it.
    pub fn number(value: f64, text: impl Into<String>) -> Self {
        Self { text: text.into(), value: Some(value) }
    }

    /// A number that may be missing.
    pub fn optional(value: Option<f64>, text: impl Fn(f64) -> String, none: &str) -> Self {
        value.map_or_else(|| Self::text(none), |value| Self::number(value, text(value)))
    }
}

/// A table with a caption.
#[derive(Debug, Clone, Default, PartialEq)]
pub struct Table {
    /// Unique on the page.
    pub id: &'static str,
    /// What it shows.
    pub caption: String,
    /// Column heads.
    pub head: Vec<String>,
    /// Rows; those marked `true` are over a limit.
    pub rows: Vec<(bool, Vec<Cell>)>,
}

impl Table {
    /// An empty table.
    pub fn new(id: &'static str, caption: impl Into<String>, head: &[&str]) -> Self {
        Self { id, caption: caption.into(), head: head.iter().map(|text| (*text).to_owned()).collect(), rows: Vec::new() }
    }

    /// Adds a row.
    pub fn row(&mut self, cells: Vec<Cell>) {
        self.rows.push((false, cells));
    }

    /// As markup; empty where there are no rows.
    pub fn html(&self) -> String {
        if self.rows.is_empty() {
            return String::new();
        }
        let mut out = format!(
            "<div class=\"wide\" tabindex=\"0\" role=\"region\" aria-label=\"{}\"><table id=\"{}\" class=\"sortable\"><caption>{}</caption><thead><tr>",
            escape(&self.caption),
            self.id,
            escape(&self.caption)
        );
        for head in &self.head {
            let _ = write!(out, "<th scope=\"col\">{}</th>", escape(head));
        }
        out.push_str("</tr></thead><tbody>");
        for (over, cells) in &self.rows {
            out.push_str(if *over { "<tr class=\"over\">" } else { "<tr>" });
            for (i, cell) in cells.iter().enumerate() {
                let tag = if i == 0 { "th scope=\"row\"" } else { "td" };
                let value = cell.value.map_or_else(String::new, |value| format!(" class=\"number\" data-value=\"{value}\""));
                let _ = write!(out, "<{tag}{value}>{}</{}>", escape(&cell.text), if i == 0 { "th" } else { "td" });
            }
            out.push_str("</tr>");
        }
        out.push_str("</tbody></table></div>");
        out
    }
}

#[cfg(test)]
mod tests {
    use super::{Cell, Table};

    #[test]
    fn cells_are_escaped_and_keep_their_value() {
        let mut table = Table::new("t", "<b>", &["a"]);
        assert_eq!(table.html(), "");
        table.row(vec![Cell::text("<script>"), Cell::number(0.123456, "0.12")]);
        let html = table.html();
        assert!(html.contains("&lt;script&gt;") && html.contains("data-value=\"0.123456\">0.12<") && !html.contains("<script>"));
    }
}
