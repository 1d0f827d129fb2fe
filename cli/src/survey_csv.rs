//! The surveyed surface as a CSV file: columns x_m, z_m and, optionally, how.
use crate::diagnostics::{Source, clip};
use crate::model_file::collect::Collector;
use crate::model_file::keys::LARGEST_COORDINATE_M;
use checker::diagnostic::{Diagnostic, nth};
use checker::model::SurfacePoint;
use std::ops::Range;

/// Largest number of points of a surface; more than that is a point cloud, not a section.
pub const MOST_POINTS: usize = 50_000;

/// Findings in one file after which reading stops.
const MOST_FINDINGS: usize = 30;

/// Where the columns stand.
#[derive(Debug, Clone, Copy)]
struct Columns {
    x_m: usize,
    z_m: usize,
    how: Option<usize>,
}

/// The points of a surface; `at` is the key path that names the file. After an error the list is empty.
pub(crate) fn read(name: &str, text: &str, at: &str, collector: &mut Collector) -> Vec<SurfacePoint> {
    let source = collector.sources.len();
    let before = collector.n_errors();
    collector.sources.push(Source { name: name.to_owned(), text: text.to_owned() });
    let mut lines = Lines::new(text);
    let Some((header, span)) = lines.next() else {
        collector.add(
            Diagnostic::error("csv.empty", at, format!("{:?} is empty", clip(name, 80))).hint("the first line names the columns: x_m,z_m"),
        );
        return Vec::new();
    };
    let Some(columns) = columns(&header, at, &span, source, collector) else {
        return Vec::new();
    };
    let mut points = Vec::new();
    for (i_row, (row, span)) in lines.enumerate() {
        if points.len() >= MOST_POINTS {
            let message = format!("the surface has more than {MOST_POINTS} points");
            let diagnostic = Diagnostic::error("surface.many-points", at, message).hint("thin the profile to what the section needs");
            collector.add_at(diagnostic, source, span);
            break;
        }
        collector.places.insert(&nth("section.surface", i_row), source, span.clone());
        match point(&row, columns) {
            Ok(point) => points.push(point),
            Err(fault) => {
                let place = fault.field.map_or(span.clone(), |i_field| field_span(text, &span, i_field));
                let message = format!("row {}: {}", i_row + 2, fault.message);
                collector.add_at(Diagnostic::error(fault.code, nth("section.surface", i_row), message).hint(fault.hint), source, place);
                if collector.n_errors() > before + MOST_FINDINGS {
                    break;
                }
            }
        }
    }
    if points.is_empty() && collector.n_errors() == before {
        collector.add(Diagnostic::error("csv.empty", at, format!("{:?} has no points", clip(name, 80))).hint("add a row a point: x,z"));
    }
    if collector.n_errors() > before { Vec::new() } else { points }
}

/// The lines that are not blank, with their places.
struct Lines<'t> {
    text: &'t str,
    start: usize,
}

impl<'t> Lines<'t> {
    fn new(text: &'t str) -> Self {
        Self { text, start: 0 }
    }
}

impl Iterator for Lines<'_> {
    type Item = (Vec<String>, Range<usize>);

    fn next(&mut self) -> Option<Self::Item> {
        loop {
            let rest = self.text.get(self.start..).filter(|rest| !rest.is_empty())?;
            let length = rest.find('\n').unwrap_or(rest.len());
            let line = rest[..length].trim_end_matches('\r');
            let span = self.start..self.start + line.len();
            self.start += length + 1;
            if !line.trim().is_empty() {
                return Some((fields(line), span));
            }
        }
    }
}

/// The fields of one line; quotes are taken off. A surface has no fields with line breaks.
fn fields(line: &str) -> Vec<String> {
    if !line.contains('"') {
        return line.split(',').map(|field| field.trim().to_owned()).collect();
    }
    let mut reader = csv::ReaderBuilder::new().has_headers(false).flexible(true).trim(csv::Trim::All).from_reader(line.as_bytes());
    match reader.records().next() {
        Some(Ok(record)) => record.iter().map(str::to_owned).collect(),
        _ => Vec::new(),
    }
}

fn columns(header: &[String], at: &str, span: &Range<usize>, source: usize, collector: &mut Collector) -> Option<Columns> {
    let line = header.join(",");
    let find = |key: &str| header.iter().position(|name| name.eq_ignore_ascii_case(key));
    let (x_m, z_m, how) = (find("x_m"), find("z_m"), find("how"));
    if let (Some(x_m), Some(z_m)) = (x_m, z_m) {
        return Some(Columns { x_m, z_m, how });
    }
    let missing = if x_m.is_none() { "x_m" } else { "z_m" };
    let hint = if line.contains(';') {
        "the columns are separated by semicolons: save the file with commas and decimal points"
    } else if line.contains('\t') {
        "the columns are separated by tabs: save the file with commas"
    } else if header.iter().all(|name| name.parse::<f64>().is_ok()) {
        "the first line must name the columns: x_m,z_m"
    } else {
        "the first line names the columns: x_m (landward), z_m (level) and, optionally, how (measured or inferred)"
    };
    let message = format!("the CSV file has no column {missing}; its first line is {:?}", clip(&line, 60));
    collector.add_at(Diagnostic::error("csv.column", at, message).hint(hint), source, span.clone());
    None
}

/// What is wrong with a row.
struct Fault {
    code: &'static str,
    field: Option<usize>,
    message: String,
    hint: &'static str,
}

fn point(row: &[String], columns: Columns) -> Result<SurfacePoint, Fault> {
    let most = columns.x_m.max(columns.z_m).max(columns.how.unwrap_or(0)) + 1;
    let least = columns.x_m.max(columns.z_m) + 1;
    if row.len() == 1 && row[0].contains(';') {
        let message = "the fields are separated by semicolons".to_owned();
        return Err(Fault { code: "csv.row", field: None, message, hint: "save the file with commas and decimal points" });
    }
    if row.len() < least || (row.len() > most && row[most..].iter().any(|field| field.parse::<f64>().is_ok()) && columns.how.is_none()) {
        let message = if row.len() == 1 { "there is only 1 field".to_owned() } else { format!("there are {} fields", row.len()) };
        let hint = if row.len() > most { "are these decimal commas? Write decimal points" } else { "every row needs x_m and z_m" };
        return Err(Fault { code: "csv.row", field: None, message, hint });
    }
    let x_m = number(&row[columns.x_m], columns.x_m, "x_m")?;
    let z_m = number(&row[columns.z_m], columns.z_m, "z_m")?;
    let inferred = match columns.how.and_then(|i_field| row.get(i_field)).map(|how| how.to_ascii_lowercase()).as_deref() {
        None | Some("" | "measured") => false,
        Some("inferred") => true,
        Some(other) => {
            let message = format!("column how: {:?} is neither measured nor inferred", clip(other, 30));
            return Err(Fault {
                code: "csv.word",
                field: columns.how,
                message,
                hint: "write measured or inferred, or leave the field empty",
            });
        }
    };
    Ok(SurfacePoint { x_m, z_m, inferred })
}

fn number(field: &str, i_field: usize, column: &str) -> Result<f64, Fault> {
    let fault = |message: String, hint: &'static str| Fault { code: "csv.number", field: Some(i_field), message, hint };
    match field.parse::<f64>() {
        Ok(number) if !number.is_finite() => {
            Err(fault(format!("column {column}: {field} cannot be used"), "leave the row out if the point was not measured"))
        }
        Ok(number) if number.abs() > LARGEST_COORDINATE_M => Err(fault(
            format!("column {column}: {number} m is over the limit of {LARGEST_COORDINATE_M} m"),
            "coordinates count from a fixed mark near the cliff; grid coordinates belong in [location]",
        )),
        Ok(number) => Ok(number),
        Err(_) if field.is_empty() => Err(fault(format!("column {column} is empty"), "leave the row out if the point was not measured")),
        Err(_) if field.replace(',', ".").parse::<f64>().is_ok() => {
            Err(fault(format!("column {column}: {:?} has a decimal comma", clip(field, 30)), "write a decimal point"))
        }
        Err(_) => Err(fault(format!("column {column}: {:?} is not a number", clip(field, 30)), "write a plain number in m")),
    }
}

/// The place of a field in a line without quotes; of the whole line otherwise.
fn field_span(text: &str, line: &Range<usize>, i_field: usize) -> Range<usize> {
    let content = &text[line.clone()];
    if content.contains('"') {
        return line.clone();
    }
    let start = content.split(',').take(i_field).map(|field| field.len() + 1).sum::<usize>();
    let length = content[start.min(content.len())..].split(',').next().map_or(0, str::len);
    line.start + start..line.start + start + length
}
