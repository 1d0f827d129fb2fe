//! Data for the interactive figures: fields on a grid, as numbers that a script can look up.
use std::fmt::Write;

use checker::outcome::FieldSnapshot;

use crate::output::figures::Figures;
use crate::output::svg::field::Quantity;
use crate::output::svg::grid::Grid;

/// Size of a grid cell, px.
const CELL_PX: f64 = 8.0;
/// Stands for "no rock here".
const EMPTY: i16 = i16::MIN;
/// Largest number that a value is scaled to.
const FULL: f64 = 32000.0;

/// Depths, window and grids as one JSON object that is harmless inside a page.
pub fn data(figures: &Figures<'_>) -> String {
    let frame = &figures.frame;
    let depths = figures.fields.iter().map(|field| {
        serde_json::json!({
            "depth_m": field.depth_m,
            "stress": grid(figures, field, Quantity::MajorStress),
            "utilization": grid(figures, field, Quantity::Utilization),
        })
    });
    let object = serde_json::json!({
        "window": {
            "x_m": frame.x_m, "z_m": frame.z_m, "left": frame.left, "top": frame.top, "px_per_m": frame.px_per_m,
        },
        "depths": depths.collect::<Vec<_>>(),
    });
    // "<" cannot close the element that holds the data.
    object.to_string().replace('<', "\\u003c")
}

fn grid(figures: &Figures<'_>, field: &FieldSnapshot, quantity: Quantity) -> serde_json::Value {
    let grid = Grid::sample(&quantity.pieces(field, &figures.frame), &figures.frame, CELL_PX);
    let largest = grid.values.iter().filter(|value| value.is_finite()).fold(0.0_f64, |max, value| max.max(value.abs()));
    let step = if 0.0 < largest { largest / FULL } else { 1.0 };
    let bytes: Vec<u8> = grid
        .values
        .iter()
        .map(|value| if value.is_finite() { (value / step).round() as i16 } else { EMPTY })
        .flat_map(i16::to_le_bytes)
        .collect();
    serde_json::json!({ "columns": grid.size[0], "rows": grid.size[1], "step": step, "data": base64(&bytes) })
}

/// Bytes as text: RFC 4648, section 4.
pub fn base64(bytes: &[u8]) -> String {
    const ALPHABET: &[u8; 64] = b"ABCDEFGHIJKLMNOPQRSTUVWXYZabcdefghijklmnopqrstuvwxyz0123456789+/";
    let mut out = String::with_capacity(bytes.len().div_ceil(3) * 4);
    for chunk in bytes.chunks(3) {
        let word = chunk.iter().fold(0_u32, |word, byte| (word << 8) | u32::from(*byte)) << (8 * (3 - chunk.len()));
        for i in 0..4 {
            let letter = ALPHABET[((word >> (18 - 6 * i)) & 63) as usize];
            out.push(if i <= chunk.len() { char::from(letter) } else { '=' });
        }
    }
    out
}

/// The contour figures of all depths, kept aside until a script shows one.
pub fn templates(figures: &Figures<'_>) -> String {
    let mut out = String::new();
    for (i, field) in figures.fields.iter().enumerate() {
        for quantity in [Quantity::MajorStress, Quantity::Utilization] {
            let id = format!("x-{}-{i}", quantity.id());
            let picture = figures.field(quantity, field, &id).inline();
            let _ = write!(out, "<template data-index=\"{i}\" data-quantity=\"{}\">{picture}</template>", quantity.id());
        }
    }
    out
}

#[cfg(test)]
mod tests {
    use super::base64;

    /// Test vectors of RFC 4648, section 10.
    #[test]
    fn base64_as_published() {
        let vectors =
            [("", ""), ("f", "Zg=="), ("fo", "Zm8="), ("foo", "Zm9v"), ("foob", "Zm9vYg=="), ("fooba", "Zm9vYmE="), ("foobar", "Zm9vYmFy")];
        for (plain, coded) in vectors {
            assert_eq!(base64(plain.as_bytes()), coded);
        }
    }
}
