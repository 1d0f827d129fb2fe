//! The grammar of an AGS4 file: lines of quoted fields, gathered into groups.
use checker::diagnostic::Diagnostic;

/// One data row.
#[derive(Debug, Clone, PartialEq, Eq)]
pub(super) struct Row {
    /// Line of the file, from 1.
    pub line: usize,
    /// Fields without the row's descriptor.
    pub fields: Vec<String>,
}

/// One group.
#[derive(Debug, Clone, PartialEq, Eq, Default)]
pub(super) struct Group {
    /// Four letters.
    pub name: String,
    /// Line of the GROUP row.
    pub line: usize,
    /// Headings.
    pub headings: Vec<String>,
    /// Unit of each heading.
    pub units: Vec<String>,
    /// Line of the UNIT row; 0 before it was seen.
    pub unit_line: usize,
    /// Whether a TYPE row was seen.
    typed: bool,
    /// Data.
    pub rows: Vec<Row>,
}

impl Group {
    /// Position of a heading.
    pub(super) fn position(&self, heading: &str) -> Option<usize> {
        self.headings.iter().position(|h| h == heading)
    }

    /// Field under a heading, `None` where the group has no such heading.
    pub(super) fn field<'a>(&self, row: &'a Row, heading: &str) -> Option<&'a str> {
        self.position(heading).and_then(|i| row.fields.get(i)).map(String::as_str)
    }
}

/// Gathers lines into groups.
struct Parser<'a> {
    groups: Vec<Group>,
    findings: &'a mut Vec<Diagnostic>,
    unquoted_seen: bool,
}

/// Splits a file into groups; faults name line and group.
pub(super) fn parse(text: &str, findings: &mut Vec<Diagnostic>) -> Vec<Group> {
    let mut parser = Parser { groups: Vec::new(), findings, unquoted_seen: false };
    for (i, line) in text.lines().enumerate() {
        let line = line.trim_end();
        if !line.is_empty() {
            parser.line(i + 1, line);
        }
    }
    parser.finish_group();
    parser.groups
}

impl Parser<'_> {
    fn place(&self, line: usize) -> String {
        match self.groups.last() {
            Some(group) => format!("line {line}, group {}", group.name),
            None => format!("line {line}, before any group"),
        }
    }

    fn fault(&mut self, line: usize, code: &'static str, message: String, hint: &str) {
        let at = self.place(line);
        self.findings.push(Diagnostic::error(code, at, message).hint(hint));
    }

    fn line(&mut self, line: usize, text: &str) {
        let split = match split(text) {
            Ok(split) => split,
            Err(message) => {
                return self.fault(line, "lab.quote", message.to_owned(), "each field stands in double quotes, a quote inside is doubled");
            }
        };
        if split.unquoted && !self.unquoted_seen {
            self.unquoted_seen = true;
            let at = self.place(line);
            self.findings.push(Diagnostic::warning("lab.unquoted", at, "fields without quotes; AGS4 puts every field in quotes"));
        }
        let mut fields = split.fields;
        let descriptor = fields.remove(0);
        match descriptor.as_str() {
            "GROUP" => self.group(line, &fields),
            "HEADING" | "UNIT" | "TYPE" | "DATA" if self.groups.is_empty() => {
                self.fault(line, "lab.row", format!("a {descriptor} row before any GROUP row"), "the file may be cut off at its start");
            }
            "HEADING" => self.heading(line, fields),
            "UNIT" => self.unit(line, fields),
            "TYPE" => {
                if self.has_width(line, "TYPE", fields.len()) {
                    self.last().typed = true;
                }
            }
            "DATA" => self.data(line, fields),
            other => {
                let message = format!("a row starts with `{other}`");
                self.fault(line, "lab.row", message, "rows start with GROUP, HEADING, UNIT, TYPE or DATA");
            }
        }
    }

    fn last(&mut self) -> &mut Group {
        self.groups.last_mut().expect("callers have seen a GROUP row")
    }

    fn group(&mut self, line: usize, fields: &[String]) {
        self.finish_group();
        let name = fields.first().map_or("", |name| name.trim()).to_owned();
        let earlier = self.groups.iter().find(|g| g.name == name).map(|g| g.line);
        self.groups.push(Group { name: name.clone(), line, ..Group::default() });
        if name.is_empty() {
            self.fault(line, "lab.row", "a GROUP row without a name".to_owned(), "four letters, such as SHBT");
        }
        if let Some(earlier) = earlier {
            let message = format!("group {name} stands in the file twice, first in line {earlier}");
            self.fault(line, "lab.group-twice", message, "files were joined; give them one at a time");
        }
    }

    fn heading(&mut self, line: usize, fields: Vec<String>) {
        let fields: Vec<String> = fields.into_iter().map(|f| f.trim().to_owned()).collect();
        if !self.last().headings.is_empty() {
            return self.fault(line, "lab.row", "a second HEADING row".to_owned(), "a GROUP row may be missing before it");
        }
        let twice = fields.iter().enumerate().find(|(i, h)| fields[..*i].contains(h)).map(|(_, h)| h.clone());
        if let Some(twice) = twice {
            self.fault(line, "lab.heading-twice", format!("heading {twice} stands in the row twice"), "one of the columns would be lost");
        }
        self.last().headings = fields;
    }

    fn unit(&mut self, line: usize, fields: Vec<String>) {
        if self.has_width(line, "UNIT", fields.len()) {
            let group = self.last();
            group.units = fields.into_iter().map(|f| f.trim().to_owned()).collect();
            group.unit_line = line;
        }
    }

    fn data(&mut self, line: usize, fields: Vec<String>) {
        if self.has_width(line, "DATA", fields.len()) {
            self.last().rows.push(Row { line, fields });
        }
    }

    fn has_width(&mut self, line: usize, row: &str, got: usize) -> bool {
        let expected = self.last().headings.len();
        if expected == 0 {
            self.fault(
                line,
                "lab.row",
                format!("a {row} row before the HEADING row"),
                "the group's first rows are GROUP, HEADING, UNIT, TYPE",
            );
        } else if got != expected {
            let message = format!("a {row} row with {got} fields where the HEADING row has {expected}");
            self.fault(line, "lab.fields", message, "a quote or comma may be missing");
        }
        got == expected && 0 < expected
    }

    /// What a group must have had by its end.
    fn finish_group(&mut self) {
        let Some(group) = self.groups.last() else { return };
        let (line, name, has_units, typed) = (group.line, group.name.clone(), group.unit_line != 0, group.typed);
        if group.headings.is_empty() {
            return self.fault(line, "lab.row", format!("group {name} has no HEADING row"), "the file may be cut off");
        }
        for (row, seen) in [("UNIT", has_units), ("TYPE", typed)] {
            let said =
                self.findings.iter().any(|f| f.at.ends_with(&format!("group {name}")) && f.message.contains(&format!("a {row} row")));
            if !seen && !said {
                self.fault(line, "lab.row", format!("group {name} has no {row} row"), "units must not be guessed; ask the laboratory");
            }
        }
    }
}

/// Fields of one line.
struct Split {
    fields: Vec<String>,
    unquoted: bool,
}

/// Splits a line at commas outside quotes. At least one field is returned.
fn split(line: &str) -> Result<Split, &'static str> {
    let mut fields = Vec::new();
    let mut unquoted = false;
    let mut rest = line;
    loop {
        rest = rest.trim_start_matches(' ');
        if let Some(inner) = rest.strip_prefix('"') {
            let (field, after) = quoted(inner)?;
            fields.push(field);
            rest = after.trim_start_matches(' ');
        } else {
            let end = rest.find(',').unwrap_or(rest.len());
            if rest[..end].contains('"') {
                return Err("a quote inside a field that has none at its start");
            }
            unquoted = true;
            fields.push(rest[..end].trim().to_owned());
            rest = &rest[end..];
        }
        match rest.strip_prefix(',') {
            Some(after) => rest = after,
            None if rest.is_empty() => return Ok(Split { fields, unquoted }),
            None => return Err("text after the closing quote of a field"),
        }
    }
}

/// The field up to its closing quote, and what follows.
fn quoted(inner: &str) -> Result<(String, &str), &'static str> {
    let mut field = String::new();
    let mut rest = inner;
    loop {
        let Some(end) = rest.find('"') else { return Err("a quote is not closed") };
        field.push_str(&rest[..end]);
        rest = &rest[end + 1..];
        match rest.strip_prefix('"') {
            Some(after) => {
                field.push('"');
                rest = after;
            }
            None => return Ok((field, rest)),
        }
    }
}
