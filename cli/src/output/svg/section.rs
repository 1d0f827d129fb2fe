//! The section to scale: layers, water, undercut as surveyed and at the critical depth, rupture line, ground lost.
use std::fmt::Write;

use checker::model::{Groundwater, Model, SeaLevel};
use checker::outcome::{FieldSnapshot, Outcome, PointXz};

use super::draw::{Anchor, Picture, Svg, short};
use super::frame::Frame;
use super::outline;
use crate::output::words;

/// What the drawing is made from.
#[derive(Debug, Clone, Copy)]
pub struct Drawing<'a> {
    /// Results.
    pub outcome: &'a Outcome,
    /// Model, for water, loads and inferred stretches.
    pub model: &'a Model,
    /// Body as surveyed.
    pub surveyed: &'a FieldSnapshot,
    /// Body at the critical depth of the cautious inputs, where there is one.
    pub critical: Option<&'a FieldSnapshot>,
    /// Unique on the page.
    pub id: &'a str,
}

/// Patterns that stay apart in grey, one a layer in turn: paper tint and marks on a tile of 16 px.
const PATTERNS: [(&str, &str); 8] = [
    ("#f6f3ec", "<circle cx='4' cy='4' r='.9'/><circle cx='12' cy='12' r='.9'/>"),
    ("#e9e7e3", "<path d='M0 .5H16M0 8.5H16M4 .5V8.5M12 8.5V16'/>"),
    (
        "#f3ead9",
        "<circle cx='2' cy='3' r='.7'/><circle cx='9' cy='5' r='.7'/><circle cx='5' cy='10' r='.7'/><circle cx='13' cy='13' r='.7'/>",
    ),
    ("#e4e4e6", "<path d='M1 4H9M8 12H16'/>"),
    ("#f2eeee", "<path d='M0 16L16 0M-4 4L4 -4M12 20L20 12'/>"),
    ("#e8ebef", "<path d='M0 16L16 0M0 0L16 16'/>"),
    ("#efe9e2", "<path d='M4 2V8M12 9V15'/>"),
    ("#dddde0", ""),
];

/// Left edge and width of the window, px.
const WINDOW: [f64; 2] = [58.0, 660.0];
const WIDTH: f64 = 900.0;

/// The drawing.
pub fn picture(drawing: &Drawing<'_>) -> Picture {
    let outcome = drawing.outcome;
    let frame = Frame::around_cliff(outcome, WINDOW[0], 44.0, WINDOW[1]);
    let mut svg = Svg::default();
    definitions(&mut svg, drawing, &frame);
    svg.raw(&format!("<g clip-path=\"url(#{}-w)\">", drawing.id));
    sea(&mut svg, drawing.model, &frame);
    let present = layers(&mut svg, drawing, &frame);
    lost_block(&mut svg, drawing, &frame);
    inferred(&mut svg, drawing.model, &frame);
    water_tables(&mut svg, drawing, &frame);
    future(&mut svg, drawing, &frame);
    svg.raw("</g>");
    frame.axes(&mut svg);
    loads(&mut svg, drawing.model, &frame);
    ground_lost(&mut svg, outcome, &frame);
    parts(&mut svg, outcome, &frame);
    depths(&mut svg, drawing, &frame);
    layer_names(&mut svg, drawing, &frame, &present);
    let height = key(&mut svg, drawing, &frame);
    Picture {
        width: WIDTH,
        height,
        title: format!("Section to scale: {}", outcome.model.title),
        description: description(outcome),
        body: svg.body,
    }
}

fn description(outcome: &Outcome) -> String {
    let section = &outcome.section;
    format!(
        "Cliff {} high, overhang {} thick, undercut depth (horizontal) {} as surveyed. Layers from the top: {}.",
        words::meters(section.cliff_height_m),
        words::meters(section.overhang_thickness_m),
        words::meters(section.surveyed_depth_m),
        section.layer_rocks.join(", ")
    )
}

fn definitions(svg: &mut Svg, drawing: &Drawing<'_>, frame: &Frame) {
    svg.raw(&format!(
        "<defs><clipPath id=\"{0}-w\"><rect x=\"{1}\" y=\"{2}\" width=\"{3}\" height=\"{4}\"/></clipPath>",
        drawing.id,
        short(frame.left),
        short(frame.top),
        short(frame.width()),
        short(frame.height())
    ));
    let block = drawing.critical.unwrap_or(drawing.surveyed);
    svg.raw(&format!(
        "<clipPath id=\"{}-b\"><path transform=\"scale(.1)\" clip-rule=\"evenodd\" d=\"{}\"/></clipPath>",
        drawing.id,
        outline::body(block, frame)
    ));
    for (i, (paper, marks)) in PATTERNS.iter().enumerate() {
        svg.raw(&format!(
            "<pattern id=\"{}-p{i}\" width=\"16\" height=\"16\" patternUnits=\"userSpaceOnUse\"><rect width=\"16\" height=\"16\" \
             fill=\"{paper}\"/><g fill=\"#777\" stroke=\"#8a8a8a\" stroke-width=\".7\">{marks}</g></pattern>",
            drawing.id
        ));
    }
    svg.raw("</defs>");
}

fn sea(svg: &mut Svg, model: &Model, frame: &Frame) {
    for level_m in sea_levels(model) {
        let [_, y] = frame.px([0.0, level_m]);
        svg.rect([frame.left, y, frame.width(), (frame.top + frame.height() - y).max(0.0)], "sea");
        svg.line([[frame.left, y], [frame.left + frame.width(), y]], "sealine");
    }
}

fn sea_levels(model: &Model) -> Vec<f64> {
    let mut levels: Vec<f64> = model
        .situations
        .iter()
        .filter_map(|situation| match situation.sea_level {
            SeaLevel::Level(level_m) => Some(level_m),
            SeaLevel::OffTheFace => None,
        })
        .collect();
    levels.sort_by(f64::total_cmp);
    levels.dedup();
    levels
}

/// Fills the layers and draws contacts and ground. Returns the rocks that can be seen, with the level of each at the right edge.
fn layers(svg: &mut Svg, drawing: &Drawing<'_>, frame: &Frame) -> Vec<(usize, f64)> {
    let snapshot = drawing.surveyed;
    svg.raw("<g class=\"u\" fill-rule=\"evenodd\" transform=\"scale(.1)\">");
    svg.raw(&format!("<path class=\"plain\" d=\"{}\"/>", outline::body(snapshot, frame)));
    svg.raw("</g>");
    let mut seen = Vec::new();
    for region in 0..snapshot.rock_names.len() {
        let path = outline::rock(snapshot, frame, region as u32);
        if path.is_empty() {
            continue;
        }
        // The pattern is drawn in pixels, so the outline is too.
        svg.raw(&format!(
            "<path fill=\"url(#{}-p{})\" fill-rule=\"evenodd\" d=\"{}\"/>",
            drawing.id,
            region % PATTERNS.len(),
            pixels(&path)
        ));
        svg.raw(&format!("<g class=\"u\" transform=\"scale(.1)\"><path class=\"contact\" d=\"{path}\"/></g>"));
        seen.push((region, level_at_right(snapshot, frame, region as u32)));
    }
    svg.raw(&format!("<g class=\"u\" transform=\"scale(.1)\"><path class=\"ground\" d=\"{}\"/></g>", outline::body(snapshot, frame)));
    seen
}

/// Path data in contour units as path data in pixels.
fn pixels(units: &str) -> String {
    let mut out = String::with_capacity(units.len() + 64);
    let mut number = String::new();
    let flush = |number: &mut String, out: &mut String| {
        if let Ok(value) = number.parse::<f64>() {
            let _ = write!(out, "{} ", short(value / super::contour::UNITS_PER_PX));
        }
        number.clear();
    };
    for c in units.chars() {
        if c == '-' || !(c.is_ascii_digit()) {
            flush(&mut number, &mut out);
        }
        match c {
            '-' | '0'..='9' => number.push(c),
            ' ' => {}
            letter => out.push(letter),
        }
    }
    flush(&mut number, &mut out);
    out
}

/// Middle level of a rock near the right edge of the window; else of all that is seen of it.
fn level_at_right(snapshot: &FieldSnapshot, frame: &Frame, region: u32) -> f64 {
    let range = |from_x_m: f64| {
        let mut range = [f64::INFINITY, f64::NEG_INFINITY];
        for (nodes, of) in snapshot.mesh.triangles.iter().zip(&snapshot.mesh.regions) {
            for node in nodes {
                let p = snapshot.mesh.points_m[*node as usize];
                if *of == region && frame.shows(p) && from_x_m <= p[0] {
                    range = [range[0].min(p[1]), range[1].max(p[1])];
                }
            }
        }
        range
    };
    let near = range(frame.x_m[1] - 0.08 * (frame.x_m[1] - frame.x_m[0]));
    let [low, high] = if near[0] <= near[1] { near } else { range(frame.x_m[0]) };
    0.5 * (low + high)
}

/// The part seaward of the rupture line.
fn lost_block(svg: &mut Svg, drawing: &Drawing<'_>, frame: &Frame) {
    let Some([low, high]) = rupture(drawing.outcome) else { return };
    let far = [frame.x_m[0] - 10.0, frame.z_m[1] + 10.0];
    let around = [low, high, [high[0], far[1]], far, [far[0], low[1]]].map(|p| frame.px(p));
    svg.raw(&format!("<g clip-path=\"url(#{}-b)\">", drawing.id));
    svg.polygon(&around, "lost");
    svg.raw("</g>");
}

fn rupture(outcome: &Outcome) -> Option<[PointXz; 2]> {
    outcome.critical_depth.as_ref()?.cautious.rupture_line
}

fn inferred(svg: &mut Svg, model: &Model, frame: &Frame) {
    for pair in model.section.surface.windows(2).filter(|pair| pair[1].inferred) {
        svg.line([[pair[0].x_m, pair[0].z_m], [pair[1].x_m, pair[1].z_m]].map(|p| frame.px(p)), "inner inferred");
    }
}

fn water_tables(svg: &mut Svg, drawing: &Drawing<'_>, frame: &Frame) {
    for situation in &drawing.model.situations {
        if let Some(Groundwater::Table(points)) = &situation.groundwater {
            let mut px: Vec<[f64; 2]> = points.iter().map(|p| frame.px(*p)).collect();
            if let Some(last) = points.last() {
                px.push(frame.px([frame.x_m[1].max(last[0]), last[1]]));
            }
            svg.polyline(&px, "table");
            // The usual sign for a water level, where the table enters the window from the left.
            if let Some([x, y]) = px.iter().find(|p| frame.left + 20.0 < p[0]) {
                svg.polygon(&[[x + 34.0, y - 9.0], [x + 46.0, y - 9.0], [x + 40.0, y - 1.0]], "sea");
            }
        }
    }
}

/// The hollow at the critical depth and the rupture line.
fn future(svg: &mut Svg, drawing: &Drawing<'_>, frame: &Frame) {
    if let Some(critical) = drawing.critical {
        let free = outline::free_sides(drawing.surveyed);
        let near_surveyed = |p: PointXz| free.iter().any(|side| distance(p, *side) < 0.05 + 0.3 / frame.px_per_m);
        let changed = outline::free_sides(critical);
        for side in changed.iter().filter(|side| frame.shows(side[0]) || frame.shows(side[1])) {
            if !near_surveyed([0.5 * (side[0][0] + side[1][0]), 0.5 * (side[0][1] + side[1][1])]) {
                svg.line(side.map(|p| frame.px(p)), "future-side");
            }
        }
    }
    if let Some(line) = rupture(drawing.outcome) {
        svg.line(line.map(|p| frame.px(p)), "rupture");
    }
}

fn distance(p: PointXz, [a, b]: [PointXz; 2]) -> f64 {
    let d = [b[0] - a[0], b[1] - a[1]];
    let square = d[0] * d[0] + d[1] * d[1];
    let t = if 0.0 < square { (((p[0] - a[0]) * d[0] + (p[1] - a[1]) * d[1]) / square).clamp(0.0, 1.0) } else { 0.0 };
    (p[0] - a[0] - t * d[0]).hypot(p[1] - a[1] - t * d[1])
}

fn loads(svg: &mut Svg, model: &Model, frame: &Frame) {
    for load in &model.surcharges {
        let ground_m = |x: f64| {
            let at = |pair: &[checker::model::SurfacePoint]| {
                let (a, b) = (&pair[0], &pair[1]);
                let inside = a.x_m.min(b.x_m) <= x && x <= a.x_m.max(b.x_m) && a.x_m < b.x_m;
                inside.then(|| a.z_m + (b.z_m - a.z_m) * (x - a.x_m) / (b.x_m - a.x_m))
            };
            model.section.surface.windows(2).filter_map(at).fold(f64::NEG_INFINITY, f64::max)
        };
        let middle_m = 0.5 * (load.x_m[0] + load.x_m[1]);
        let level_m = ground_m(middle_m);
        if !level_m.is_finite() || !frame.shows([middle_m, level_m]) {
            continue;
        }
        let [from, to] = load.x_m.map(|x| frame.px([x, level_m]));
        svg.rect([from[0], from[1] - 7.0, to[0] - from[0], 6.0], "load");
        let text = format!("{}, {} kPa", load.name, words::figures(load.pressure_pa * 1e-3));
        svg.text([0.5 * (from[0] + to[0]), from[1] - 12.0], Anchor::Middle, "halo small", &text);
    }
}

/// The ground that goes, as a dimension above the brow.
fn ground_lost(svg: &mut Svg, outcome: &Outcome, frame: &Frame) {
    let Some(cautious) = outcome.critical_depth.as_ref().map(|critical| &critical.cautious) else { return };
    let Some(lost_m) = cautious.ground_lost_m else { return };
    let brow = outcome.section.brow;
    let y = 30.0;
    let [from, to] = [brow[0], brow[0] + lost_m].map(|x| frame.px([x, brow[1]])[0]);
    svg.dimension([[from, y], [to, y]], "lostline");
    for x in [from, to] {
        svg.line([[x, y], [x, frame.px(brow)[1]]], "leader");
    }
    let range = cautious.ground_lost_range_m.map_or_else(String::new, |[a, b]| format!(" ({a:.1} to {b:.1} m on lines nearly as bad)"));
    svg.text([from, y - 10.0], Anchor::Start, "label strong", &format!("ground lost {lost_m:.1} m{range}"));
}

/// Names of the parts, in the free space on the seaward side.
fn parts(svg: &mut Svg, outcome: &Outcome, frame: &Frame) {
    let section = &outcome.section;
    let mut labels: Vec<(&str, PointXz)> = vec![("brow", section.brow)];
    labels.extend(
        [("lip", section.lip), ("back", section.back), ("mouth", section.mouth)].iter().filter_map(|(name, at)| at.map(|at| (*name, at))),
    );
    labels.sort_by(|a, b| b.1[1].total_cmp(&a.1[1]));
    let x = frame.left + 0.16 * frame.width();
    let mut lowest = frame.top;
    for (name, at) in labels {
        let px = frame.px(at);
        // The mouth lies on the ground line: its name goes below it.
        let y = if name == "mouth" { px[1] + 18.0 } else { px[1] - 4.0 }.max(lowest + 17.0);
        lowest = y;
        svg.circle(px, 3.0, "dot");
        svg.polyline(&[[x, y], [x + 12.0, y], px], "leader");
        svg.text([x - 5.0, y + 4.0], Anchor::End, "halo", &format!("{name}  {}", words::place(at)));
    }
}

/// Undercut depths as dimensions in the rock below the floor.
fn depths(svg: &mut Svg, drawing: &Drawing<'_>, frame: &Frame) {
    let section = &drawing.outcome.section;
    let Some((lip, mouth)) = section.lip.zip(section.mouth) else { return };
    let critical = drawing.outcome.critical_depth.as_ref().map(|critical| &critical.cautious);
    let rows = [
        (Some(section.surveyed_depth_m), "as surveyed", "ground"),
        (critical.and_then(|critical| critical.depth_m), "critical, cautious inputs", "lostline"),
    ];
    let mut y = frame.px(mouth)[1] + 22.0;
    svg.text([frame.px(lip)[0] - 8.0, y + 20.0], Anchor::End, "halo small", "undercut depth (horizontal)");
    for (depth_m, what, class) in rows {
        let Some(depth_m) = depth_m else { continue };
        let [from, to] = [lip[0], lip[0] + depth_m].map(|x| frame.px([x, 0.0])[0]);
        svg.dimension([[from, y], [to, y]], class);
        svg.text([to + 8.0, y + 4.0], Anchor::Start, "halo strong", &format!("{} {what}", words::meters(depth_m)));
        y += 20.0;
    }
}

/// Names of the layers in the right margin, pushed apart where they would overlap.
fn layer_names(svg: &mut Svg, drawing: &Drawing<'_>, frame: &Frame, present: &[(usize, f64)]) {
    let right = frame.left + frame.width();
    let mut rows: Vec<(usize, f64)> = present.to_vec();
    rows.sort_by(|a, b| b.1.total_cmp(&a.1));
    let mut lowest = frame.top - 10.0;
    for (region, level_m) in rows {
        let at = frame.px([0.0, level_m])[1];
        let y = at.max(lowest + 34.0);
        lowest = y;
        svg.polyline(&[[right, at], [right + 8.0, y], [right + 14.0, y]], "leader");
        svg.raw(&format!(
            "<rect x=\"{}\" y=\"{}\" width=\"18\" height=\"18\" fill=\"url(#{}-p{})\" stroke=\"#333\"/>",
            short(right + 16.0),
            short(y - 9.0),
            drawing.id,
            region % PATTERNS.len()
        ));
        for (i, line) in wrap(&drawing.surveyed.rock_names[region], 18).iter().enumerate() {
            svg.text([right + 40.0, y + 4.0 + 14.0 * i as f64], Anchor::Start, "label", line);
        }
    }
}

/// Breaks a name into lines of at most about `width` characters, two at most.
fn wrap(text: &str, width: usize) -> Vec<String> {
    let mut lines = vec![String::new()];
    for word in text.split_whitespace() {
        let last = lines.len() - 1;
        if !lines[last].is_empty() && width < lines[last].chars().count() + 1 + word.chars().count() && lines.len() < 2 {
            lines.push(word.to_owned());
        } else {
            let gap = if lines[last].is_empty() { "" } else { " " };
            lines[last] = format!("{}{gap}{word}", lines[last]);
        }
    }
    lines
        .into_iter()
        .map(|line| if width + 4 < line.chars().count() { line.chars().take(width + 3).chain(['\u{2026}']).collect() } else { line })
        .collect()
}

/// Key to the lines below the drawing. Returns the height of the picture.
fn key(svg: &mut Svg, drawing: &Drawing<'_>, frame: &Frame) -> f64 {
    let mut rows: Vec<(&str, String)> = vec![("ground", "ground as surveyed".into())];
    if drawing.model.section.surface.iter().any(|point| point.inferred) {
        rows.push(("contact inferred", "inferred, not measured".into()));
    }
    if drawing.critical.is_some() {
        rows.push(("future-side", "hollow at the critical depth, cautious inputs".into()));
    }
    if let Some(cautious) = rupture(drawing.outcome).and(drawing.outcome.critical_depth.as_ref()).map(|critical| &critical.cautious) {
        rows.push(("rupture", format!("rupture line, {}", cautious.check.unwrap_or("governing check"))));
    }
    for situation in &drawing.model.situations {
        if let Some(Groundwater::Table(_)) = &situation.groundwater {
            rows.push(("table", format!("water table, {}", situation.name)));
        }
    }
    let levels = sea_levels(drawing.model);
    for level_m in &levels {
        rows.push(("sealine", format!("sea at {} m", words::fixed(*level_m, 1))));
    }
    let top = frame.top + frame.height() + 58.0;
    for (i, (class, text)) in rows.iter().enumerate() {
        let x = frame.left + 420.0 * (i % 2) as f64;
        let y = top + 20.0 * (i / 2) as f64;
        svg.line([[x, y], [x + 38.0, y]], class);
        svg.text([x + 46.0, y + 4.0], Anchor::Start, "label", text);
    }
    top + 20.0 * rows.len().div_ceil(2) as f64 + 4.0
}

#[cfg(test)]
mod tests {
    use super::super::super::fixture;
    use super::{Drawing, picture, pixels, wrap};

    #[test]
    fn the_drawing_names_what_it_shows() {
        let (outcome, model) = (fixture::outcome(), fixture::model());
        let (surveyed, critical) = (fixture::snapshot(2.3), fixture::snapshot(5.1));
        let drawing = Drawing { outcome: &outcome, model: &model, surveyed: &surveyed, critical: Some(&critical), id: "s" };
        let picture = picture(&drawing);
        for part in [
            "brow",
            "lip",
            "ground lost 8.1 m (6.9 to 10.5 m on lines nearly as bad)",
            "2.30 m as surveyed",
            "5.10 m critical, cautious inputs",
            "undercut depth (horizontal)",
            "upper limestone",
            "water table, wet winter, lowest tide",
            "lookout hut, 40.0 kPa",
            "class=\"future-side\"",
            "distance x, landward (m)",
        ] {
            assert!(picture.body.contains(part), "{part}");
        }
    }

    #[test]
    fn helpers() {
        assert_eq!(pixels("M333 0l0 1000 667 0 0-1000z"), "M33.3 0 l0 100 66.7 0 0 -100 z");
        assert_eq!(wrap("very weathered upper limestone", 18), ["very weathered", "upper limestone"]);
    }
}
