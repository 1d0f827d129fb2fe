//! Filled contours of one field at one depth, with legend, principal-stress crosses and the places of the checks.
use std::fmt::Write;

use checker::outcome::{FieldSnapshot, PointXz};

use super::color;
use super::contour::{self, Piece};
use super::draw::{Anchor, Picture, Svg, short};
use super::frame::{Frame, nice_step};
use super::grid::Grid;
use super::outline;
use crate::output::words;

/// What a contour figure shows.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Quantity {
    /// Major effective principal stress, kPa.
    MajorStress,
    /// The larger of tension and shear utilization, point values.
    Utilization,
}

impl Quantity {
    /// Name with unit.
    pub fn name(self) -> &'static str {
        match self {
            Self::MajorStress => "major principal stress (effective), kPa",
            Self::Utilization => "utilization at a point (demand / capacity)",
        }
    }

    /// Short name without unit, for file names and ids.
    pub fn id(self) -> &'static str {
        match self {
            Self::MajorStress => "stress",
            Self::Utilization => "utilization",
        }
    }

    /// Value at an element's node.
    pub fn value(self, snapshot: &FieldSnapshot, i_elem: usize, i_local: usize) -> f64 {
        match self {
            Self::MajorStress => snapshot.principal_effective(i_elem, i_local).major_pa * 1e-3,
            Self::Utilization => snapshot.tension_utilization[i_elem][i_local].max(snapshot.shear_utilization[i_elem][i_local]),
        }
    }

    /// Pieces with the values of this quantity.
    pub fn pieces(self, snapshot: &FieldSnapshot, frame: &Frame) -> Vec<Piece> {
        outline::pieces(snapshot, frame, &|i_elem, i_local| self.value(snapshot, i_elem, i_local))
    }
}

/// Levels and the colors of the bands between them; `colors[0]` lies below `levels[0]`.
#[derive(Debug, Clone, PartialEq)]
pub struct Scale {
    /// What is scaled.
    pub quantity: Quantity,
    /// Levels, growing.
    pub levels: Vec<f64>,
    /// One more than levels.
    pub colors: Vec<String>,
}

/// Share of the area that may lie beyond the ends of a scale: the neighborhood of sharp corners.
const BEYOND: f64 = 0.002;

impl Scale {
    /// One scale for all snapshots, so that pictures can be compared.
    pub fn new(quantity: Quantity, snapshots: &[&FieldSnapshot], frame: &Frame) -> Self {
        match quantity {
            Quantity::MajorStress => Self::stress(snapshots, frame),
            Quantity::Utilization => {
                let levels = vec![0.1, 0.2, 0.4, 0.6, 0.8, 1.0, 1.5, 2.0];
                let colors = (0..=levels.len()).map(|i| color::utilization(i as f64 / levels.len() as f64).hex()).collect();
                Self { quantity, levels, colors }
            }
        }
    }

    fn stress(snapshots: &[&FieldSnapshot], frame: &Frame) -> Self {
        let ends = snapshots.iter().map(|snapshot| common_range(&Quantity::MajorStress.pieces(snapshot, frame)));
        let [low, high] = ends.fold([0.0, 0.0], |all, one| [f64::min(all[0], one[0]), f64::max(all[1], one[1])]);
        let step = nice_step(high.max(-low / 50.0).max(1e-3) / 6.0);
        let n_tension = ((high / step).ceil() as usize).clamp(1, 8);
        let n_compression = [1.0, 2.0, 5.0, 10.0, 20.0, 50.0, 100.0].iter().filter(|factor| **factor * step < -low).count().max(1);
        let below = [1.0, 2.0, 5.0, 10.0, 20.0, 50.0, 100.0][..n_compression].iter().rev().map(|factor| -factor * step);
        let levels: Vec<f64> = below.chain((0..n_tension).map(|i| i as f64 * step)).collect();
        let part = |i: usize, n: usize| if n < 2 { 1.0 } else { i as f64 / (n - 1) as f64 };
        let compression = (0..=n_compression).rev().map(|i| color::compression(part(i, n_compression + 1)).hex());
        let tension = (0..n_tension).map(|i| color::tension(part(i, n_tension)).hex());
        Self { quantity: Quantity::MajorStress, levels, colors: compression.chain(tension).collect() }
    }
}

/// Range of the values without the share of the area beyond them.
fn common_range(pieces: &[Piece]) -> [f64; 2] {
    let mut weighted: Vec<(f64, f64)> = pieces
        .iter()
        .map(|piece| {
            let [a, b, c] = piece.at_m;
            let area = (b[0] - a[0]) * (c[1] - a[1]) - (c[0] - a[0]) * (b[1] - a[1]);
            (piece.values.iter().sum::<f64>() / 3.0, area.max(0.0))
        })
        .collect();
    weighted.sort_by(|a, b| a.0.total_cmp(&b.0));
    let all: f64 = weighted.iter().map(|(_, area)| area).sum();
    let at = |share: f64| {
        let mut sum = 0.0;
        let found = weighted.iter().find(|(_, area)| {
            sum += area;
            share * all <= sum
        });
        found.or(weighted.last()).map_or(0.0, |(value, _)| *value)
    };
    [at(BEYOND), at(1.0 - BEYOND)]
}

/// Everything that a contour figure shows beside the field.
#[derive(Debug, Clone, Copy)]
pub struct Marks<'a> {
    /// Unique on the page.
    pub id: &'a str,
    /// The governing check at this depth, with its utilization in words.
    pub governing: Option<(&'a str, &'a str)>,
    /// Rupture line.
    pub rupture_line: Option<[PointXz; 2]>,
    /// Whether crosses are drawn.
    pub crosses: bool,
}

/// Width of the picture, px.
pub const WIDTH: f64 = 910.0;
/// Left edge and width of the window, px.
pub const WINDOW: [f64; 2] = [58.0, 660.0];

/// The figure.
pub fn picture(snapshot: &FieldSnapshot, scale: &Scale, frame: &Frame, marks: &Marks<'_>) -> Picture {
    let mut svg = Svg::default();
    let bottom = frame.top + frame.height();
    svg.raw(&format!(
        "<defs><clipPath id=\"{0}-w\"><rect x=\"{1}\" y=\"{2}\" width=\"{3}\" height=\"{4}\"/></clipPath>\
         <pattern id=\"{0}-h\" width=\"80\" height=\"80\" patternUnits=\"userSpaceOnUse\"><path class=\"hatch\" \
         d=\"M0 80L80 0M-20 20L20 -20M60 100L100 60\"/></pattern></defs><g clip-path=\"url(#{0}-w)\">",
        marks.id,
        short(frame.left),
        short(frame.top),
        short(frame.width()),
        short(frame.height())
    ));
    bands(&mut svg, snapshot, scale, (frame, marks.id));
    if marks.crosses {
        crosses(&mut svg, snapshot, frame);
    }
    if let Some(line) = marks.rupture_line {
        svg.line(line.map(|p| frame.px(p)), "rupture");
    }
    svg.raw("</g>");
    frame.axes(&mut svg);
    let mut y = legend(&mut svg, scale, frame);
    y = places(&mut svg, snapshot, frame, marks, y + 26.0);
    if marks.crosses {
        y = cross_key(&mut svg, frame, y + 12.0);
    }
    Picture {
        width: WIDTH,
        height: (bottom + 48.0).max(y + 10.0),
        title: format!("{} at undercut depth (horizontal) {}", scale.quantity.name(), words::meters(snapshot.depth_m)),
        description: format!(
            "Filled contours on the section, best estimate, situation {}. Axes in metres, equal scale. {}",
            snapshot.situation,
            marks.governing.map_or_else(String::new, |(check, value)| format!("Governing check: {check}, utilization {value}."))
        ),
        body: svg.body,
    }
}

fn bands(svg: &mut Svg, snapshot: &FieldSnapshot, scale: &Scale, (frame, id): (&Frame, &str)) {
    let pieces = scale.quantity.pieces(snapshot, frame);
    let body = contour::outline(&pieces, frame);
    svg.raw("<g class=\"u\" fill-rule=\"evenodd\" transform=\"scale(.1)\">");
    let _ = write!(svg.body, "<path fill=\"{}\" d=\"{body}\"/>", scale.colors[0]);
    let special = match scale.quantity {
        Quantity::MajorStress => 0.0,
        Quantity::Utilization => 1.0,
    };
    let mut line = String::new();
    for (level, color) in scale.levels.iter().zip(&scale.colors[1..]) {
        let region = contour::region_at_least(&pieces, *level, frame);
        if region.is_empty() {
            continue;
        }
        let _ = write!(svg.body, "<path class=\"iso\" style=\"fill:{color}\" d=\"{region}\"/>");
        if (level - special).abs() < 1e-12 {
            line = region;
        }
    }
    if !line.is_empty() {
        let class = if scale.quantity == Quantity::Utilization { "limit" } else { "zero" };
        if class == "limit" {
            let _ = write!(svg.body, "<path class=\"limithalo\" d=\"{line}\"/>");
        } else {
            // Grey prints tell tension by its hatching too.
            let _ = write!(svg.body, "<path fill=\"url(#{id}-h)\" d=\"{line}\"/>");
        }
        let _ = write!(svg.body, "<path class=\"{class}\" d=\"{line}\"/>");
    }
    let _ = write!(svg.body, "<path class=\"ground\" d=\"{body}\"/></g>");
}

/// Principal stresses as crosses on a grid: length by the square root of the stress, thick where tension, thin where compression.
fn crosses(svg: &mut Svg, snapshot: &FieldSnapshot, frame: &Frame) {
    const SPACING_PX: f64 = 33.0;
    const LONGEST_PX: f64 = 15.0;
    let component = |i: usize| {
        let pieces = outline::pieces(snapshot, frame, &|i_elem, i_local| snapshot.effective_stress_pa[i_elem][i_local][i]);
        Grid::sample(&pieces, frame, SPACING_PX)
    };
    let [xx, zz, xz] = [component(0), component(1), component(2)];
    let largest = xx.values.iter().chain(&zz.values).filter(|value| value.is_finite()).fold(1.0_f64, |max, value| max.max(value.abs()));
    let (mut pull, mut push) = (String::new(), String::new());
    for row in 0..xx.size[1] {
        for column in 0..xx.size[0] {
            let i = row * xx.size[0] + column;
            if !xx.values[i].is_finite() {
                continue;
            }
            let p = checker::outcome::principal([xx.values[i], zz.values[i], xz.values[i], 0.0]);
            let center = frame.px(xx.center_m(column, row, frame));
            let (sin, cos) = p.direction_rad.sin_cos();
            for (stress, [dx, dz]) in [(p.major_pa, [cos, sin]), (p.minor_pa, [-sin, cos])] {
                let arm = LONGEST_PX * (stress.abs() / largest).sqrt();
                if 1.0 < arm {
                    let path = if 0.0 < stress { &mut pull } else { &mut push };
                    let [ax, ay] = [arm * dx, -arm * dz];
                    let _ = write!(path, "M{} {}l{} {}", short(center[0] - ax), short(center[1] - ay), short(2.0 * ax), short(2.0 * ay));
                }
            }
        }
    }
    svg.raw(&format!("<g class=\"crosses\"><path class=\"push\" d=\"{push}\"/><path class=\"pull\" d=\"{pull}\"/></g>"));
}

/// Boxes from the highest band down. Returns where the next thing may start.
fn legend(svg: &mut Svg, scale: &Scale, frame: &Frame) -> f64 {
    const BOX: [f64; 2] = [26.0, 20.0];
    let x = frame.left + frame.width() + 18.0;
    let mut y = frame.top + 12.0;
    let lines = match scale.quantity {
        Quantity::MajorStress => ["major principal stress", "(effective), kPa"],
        Quantity::Utilization => ["utilization at a point", "(demand / capacity)"],
    };
    for text in lines {
        svg.text([x, y], Anchor::Start, "label strong", text);
        y += 16.0;
    }
    y += 4.0;
    let n = scale.levels.len();
    for i in (0..=n).rev() {
        svg.swatch([x, y, BOX[0], BOX[1]], &scale.colors[i]);
        svg.rect([x, y, BOX[0], BOX[1]], "frame");
        y += BOX[1];
        if 0 < i {
            let level = scale.levels[i - 1];
            svg.line([[x, y], [x + BOX[0] + 5.0, y]], "axis");
            svg.text([x + BOX[0] + 9.0, y + 4.0], Anchor::Start, "tick", &legend_text(level));
            let is_zero = scale.quantity == Quantity::MajorStress && level.abs() < 1e-12;
            if is_zero {
                svg.line([[x - 4.0, y], [x + BOX[0] + 5.0, y]], "zero");
                svg.text([x + BOX[0] + 52.0, y - 6.0], Anchor::Start, "label strong", "tension");
                svg.text([x + BOX[0] + 52.0, y + 13.0], Anchor::Start, "label strong", "compression");
            }
            if scale.quantity == Quantity::Utilization && (level - 1.0).abs() < 1e-12 {
                svg.line([[x - 4.0, y], [x + BOX[0] + 5.0, y]], "limit");
                svg.text([x + BOX[0] + 42.0, y + 4.0], Anchor::Start, "label strong", "limit");
            }
        }
    }
    y
}

fn legend_text(level: f64) -> String {
    let text = if level.abs() < 1e-12 { "0".to_owned() } else { format!("{level}") };
    text.replace('-', "\u{2212}")
}

/// Numbers at the places of the checks and their names beside. Places that would cover each other share a badge.
fn places(svg: &mut Svg, snapshot: &FieldSnapshot, frame: &Frame, marks: &Marks<'_>, top: f64) -> f64 {
    let x = frame.left + frame.width() + 18.0;
    let mut y = top;
    let mut badges: Vec<([f64; 2], String, bool)> = Vec::new();
    if !snapshot.places.is_empty() {
        svg.text([x, y], Anchor::Start, "label strong", "governing places");
        y += 18.0;
    }
    for (i, (check, at)) in snapshot.places.iter().enumerate() {
        let number = (i + 1).to_string();
        let governs = marks.governing.is_some_and(|(name, _)| name == *check);
        svg.text([x, y], Anchor::Start, if governs { "label strong" } else { "label" }, &format!("{number}  {check}"));
        y += 17.0;
        if let Some((_, value)) = marks.governing.filter(|_| governs) {
            svg.text([x + 15.0, y - 2.0], Anchor::Start, "label small", &format!("governs: {value}"));
            y += 15.0;
        }
        if !frame.shows(*at) {
            svg.text([x + 15.0, y - 2.0], Anchor::Start, "label small", "not in the picture");
            y += 15.0;
            continue;
        }
        let px = frame.px(*at);
        match badges.iter_mut().find(|(other, _, _)| (other[0] - px[0]).hypot(other[1] - px[1]) < 22.0) {
            Some((_, text, any)) => {
                *text = format!("{text},{number}");
                *any |= governs;
            }
            None => badges.push((px, number, governs)),
        }
    }
    for (px, text, governs) in badges {
        if governs {
            svg.circle(px, 9.0, "ringhalo");
            svg.circle(px, 9.0, "ring");
        }
        svg.circle(px, 3.0, "dot");
        let side = if px[0] + 40.0 < frame.left + frame.width() { (12.0, Anchor::Start) } else { (-12.0, Anchor::End) };
        let above = if frame.top + 24.0 < px[1] { -8.0 } else { 18.0 };
        svg.text([px[0] + side.0, px[1] + above], side.1, "halo strong", &text);
    }
    y
}

fn cross_key(svg: &mut Svg, frame: &Frame, y: f64) -> f64 {
    let x = frame.left + frame.width() + 18.0;
    svg.line([[x, y], [x + 24.0, y]], "pull");
    svg.text([x + 32.0, y + 4.0], Anchor::Start, "label small", "principal tension");
    svg.line([[x, y + 18.0], [x + 24.0, y + 18.0]], "push");
    svg.text([x + 32.0, y + 22.0], Anchor::Start, "label small", "principal compression");
    y + 22.0
}

#[cfg(test)]
mod tests {
    use super::super::super::fixture;
    use super::{Frame, Marks, Quantity, Scale, WINDOW, picture};

    #[test]
    fn a_stress_figure_tells_tension_from_compression() {
        let outcome = fixture::outcome();
        let frame = Frame::around_cliff(&outcome, WINDOW[0], 14.0, WINDOW[1]);
        let snapshot = fixture::snapshot(5.1);
        let scale = Scale::new(Quantity::MajorStress, &[&snapshot], &frame);
        assert!(scale.levels.contains(&0.0) && scale.levels.windows(2).all(|pair| pair[0] < pair[1]));
        assert_eq!(scale.colors.len(), scale.levels.len() + 1);
        let marks = Marks { id: "a", governing: Some(("cliff-top tension", "1.00")), rupture_line: None, crosses: true };
        let picture = picture(&snapshot, &scale, &frame, &marks);
        for part in ["tension", "compression", "kPa", "class=\"zero\"", "level z (m)", "governs: 1.00", "class=\"pull\""] {
            assert!(picture.body.contains(part), "{part}");
        }
        assert!(picture.body.len() < 90_000, "{} bytes", picture.body.len());
    }
}
