//! Picture of the shear fits: stages, lines, and what one more stage exceeds with 95 %.
use std::fmt::Write;

use checker::lab::{Fit, LabSummary};
use checker::strength::StrengthError;

use super::text::{fits, normal_range, significant};

const WIDTH: f64 = 720.0;
const HEIGHT: f64 = 480.0;
const LEFT: f64 = 70.0;
const RIGHT: f64 = 20.0;
const TOP: f64 = 40.0;
const BOTTOM: f64 = 60.0;
/// Colors of the four fits: readable in print, and told apart by their markers too.
const COLORS: [&str; 4] = ["#1b4f72", "#af601a", "#196f3d", "#7d3c98"];

/// Axes from 0 to a largest stress.
struct Frame {
    normal_pa: f64,
    shear_pa: f64,
}

impl Frame {
    fn x(&self, normal_pa: f64) -> f64 {
        LEFT + (WIDTH - LEFT - RIGHT) * normal_pa / self.normal_pa
    }

    fn y(&self, shear_pa: f64) -> f64 {
        HEIGHT - BOTTOM - (HEIGHT - TOP - BOTTOM) * shear_pa / self.shear_pa
    }
}

/// SVG of all fits; `None` where there is none.
///
/// # Errors
/// [`StrengthError`] never for a summary that was made by the program: the confidence level is fixed.
pub fn svg(summary: &LabSummary, title: &str) -> Result<Option<String>, StrengthError> {
    let fits = fits(summary);
    let largest = |value: fn(&checker::lab::Point) -> f64| fits.iter().flat_map(|(_, f)| &f.points).map(value).fold(0.0, f64::max);
    let frame = Frame {
        normal_pa: round_up(largest(|p| p.normal_pa)),
        shear_pa: round_up(largest(|p| p.shear_pa) * (1.1 + 0.05 * fits.len() as f64)),
    };
    if fits.is_empty() || frame.normal_pa <= 0.0 {
        return Ok(None);
    }
    let mut out = String::new();
    let title = escape(title);
    let _ = writeln!(
        out,
        "<svg xmlns=\"http://www.w3.org/2000/svg\" viewBox=\"0 0 {WIDTH} {HEIGHT}\" role=\"img\" aria-label=\"{title}\" font-family=\"sans-serif\" font-size=\"13\">"
    );
    let _ = writeln!(out, "<title>{title}</title>\n<rect width=\"{WIDTH}\" height=\"{HEIGHT}\" fill=\"white\"/>");
    let _ = writeln!(out, "<text x=\"{LEFT}\" y=\"24\" font-weight=\"bold\">{title}</text>");
    axes(&mut out, &frame);
    for (i, (what, fit)) in fits.iter().enumerate() {
        draw(&mut out, &frame, fit, COLORS[i % COLORS.len()])?;
        legend(&mut out, i, what, fit);
    }
    let y = legend_y(fits.len());
    let note = "dashed: carried beyond the tests; dotted: one more stage lies above with 95 %";
    let _ = writeln!(out, "<text x=\"{:.1}\" y=\"{y:.1}\" fill=\"#555\">{note}</text>", LEFT + 24.0);
    out.push_str("</svg>\n");
    Ok(Some(out))
}

fn axes(out: &mut String, frame: &Frame) {
    let (x0, y0, x1, y1) = (LEFT, HEIGHT - BOTTOM, WIDTH - RIGHT, TOP);
    for i in 0..=5 {
        let share = f64::from(i) / 5.0;
        let (normal, shear) = (share * frame.normal_pa, share * frame.shear_pa);
        let (x, y) = (frame.x(normal), frame.y(shear));
        let _ = writeln!(out, "<path d=\"M{x:.1} {y0:.1}V{y1:.1}M{x0:.1} {y:.1}H{x1:.1}\" stroke=\"#ddd\" fill=\"none\"/>");
        let _ = writeln!(out, "<text x=\"{x:.1}\" y=\"{:.1}\" text-anchor=\"middle\">{}</text>", y0 + 18.0, significant(normal / 1e3));
        let _ = writeln!(out, "<text x=\"{:.1}\" y=\"{:.1}\" text-anchor=\"end\">{}</text>", x0 - 8.0, y + 4.0, significant(shear / 1e3));
    }
    let _ = writeln!(out, "<path d=\"M{x0:.1} {y1:.1}V{y0:.1}H{x1:.1}\" stroke=\"black\" fill=\"none\"/>");
    let _ = writeln!(
        out,
        "<text x=\"{:.1}\" y=\"{:.1}\" text-anchor=\"middle\">effective normal stress, kPa</text>",
        0.5 * (x0 + x1),
        HEIGHT - 16.0
    );
    let middle = 0.5 * (y0 + y1);
    let _ = writeln!(
        out,
        "<text x=\"18\" y=\"{middle:.1}\" text-anchor=\"middle\" transform=\"rotate(-90 18 {middle:.1})\">shear strength, kPa</text>"
    );
}

fn draw(out: &mut String, frame: &Frame, fit: &Fit, color: &str) -> Result<(), StrengthError> {
    let (low, high) = normal_range(fit);
    // Solid where there are tests, dashed where the line is carried beyond them to zero.
    let line = |from: f64, to: f64, dash: &str| {
        let (x1, y1, x2, y2) = (frame.x(from), frame.y(fit.line_pa(from)), frame.x(to), frame.y(fit.line_pa(to)));
        format!("<path d=\"M{x1:.1} {y1:.1}L{x2:.1} {y2:.1}\" stroke=\"{color}\" stroke-width=\"2\"{dash} fill=\"none\"/>\n")
    };
    out.push_str(&line(low, high, ""));
    out.push_str(&line(0.0, low, " stroke-dasharray=\"6 4\""));
    let mut path = String::new();
    for i in 0..=40 {
        let normal = frame.normal_pa.min(high) * f64::from(i) / 40.0;
        let lower = fit.lower_single_pa(normal, 0.95)?.max(0.0);
        let _ = write!(path, "{}{:.1} {:.1}", if i == 0 { 'M' } else { 'L' }, frame.x(normal), frame.y(lower));
    }
    let _ = writeln!(
        out,
        "<path d=\"{path}\" stroke=\"{color}\" stroke-dasharray=\"2 3\" fill=\"none\"><title>one more stage lies above with 95 %</title></path>"
    );
    let outliers = fit.outliers();
    for (i, p) in fit.points.iter().enumerate() {
        let (x, y) = (frame.x(p.normal_pa), frame.y(p.shear_pa));
        let (fill, note) = if outliers.contains(&i) { ("white", ", outlier") } else { (color, "") };
        let _ = writeln!(
            out,
            "<circle cx=\"{x:.1}\" cy=\"{y:.1}\" r=\"4\" fill=\"{fill}\" stroke=\"{color}\" stroke-width=\"2\"><title>{} kPa at {} kPa{note}</title></circle>",
            significant(p.shear_pa / 1e3),
            significant(p.normal_pa / 1e3)
        );
    }
    Ok(())
}

fn legend_y(i: usize) -> f64 {
    TOP + 16.0 + 18.0 * i as f64
}

fn legend(out: &mut String, i: usize, what: &str, fit: &Fit) {
    let y = legend_y(i);
    let color = COLORS[i % COLORS.len()];
    let (c, phi) = (fit.cohesion_pa / 1e3, fit.friction_angle_rad().to_degrees());
    let _ = writeln!(out, "<circle cx=\"{:.1}\" cy=\"{:.1}\" r=\"4\" fill=\"{color}\"/>", LEFT + 14.0, y - 4.0);
    let _ = writeln!(
        out,
        "<text x=\"{:.1}\" y=\"{y:.1}\">{what}: c' {c:.1} kPa, phi' {phi:.1} deg, {} stages</text>",
        LEFT + 24.0,
        fit.points.len()
    );
}

/// Next of 1, 2, 2.5, 5 times a power of ten that leaves room above `value`.
fn round_up(value: f64) -> f64 {
    if value <= 0.0 {
        return 0.0;
    }
    let power = 10_f64.powf((1.05 * value).log10().floor());
    [1.0, 2.0, 2.5, 5.0, 10.0].into_iter().map(|step| step * power).find(|limit| 1.05 * value <= *limit).unwrap_or(10.0 * power)
}

fn escape(text: &str) -> String {
    text.replace('&', "&amp;").replace('<', "&lt;").replace('>', "&gt;").replace('"', "&quot;")
}
