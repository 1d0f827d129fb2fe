//! The mesh: the whole model, and the neighborhood of the undercut.
use std::collections::BTreeSet;
use std::fmt::Write;

use checker::outcome::{FieldSnapshot, Outcome};

use super::draw::{Anchor, Picture, Svg, short};
use super::frame::Frame;
use crate::output::words;

/// The mesh of one depth in two windows.
pub fn picture(snapshot: &FieldSnapshot, outcome: &Outcome, id: &str) -> Picture {
    let whole = whole_model(outcome, snapshot);
    let mut near = near_undercut(outcome, snapshot);
    near.left = whole.left + whole.width() + 76.0;
    let mut svg = Svg::default();
    for (name, frame, title) in [("a", whole, "whole model"), ("b", near, "at the undercut")] {
        window(&mut svg, snapshot, &frame, &format!("{id}-{name}"));
        frame.axes(&mut svg);
        svg.text([frame.left, frame.top - 8.0], Anchor::Start, "label strong", title);
    }
    Picture {
        width: near.left + near.width() + 16.0,
        height: whole.top + whole.height().max(near.height()) + 48.0,
        title: format!("Mesh at undercut depth (horizontal) {}", words::meters(snapshot.depth_m)),
        description: format!("{} six-node triangles, axes in metres.", snapshot.mesh.triangles.len()),
        body: svg.body,
    }
}

/// The mesh at the undercut alone.
pub fn near(snapshot: &FieldSnapshot, outcome: &Outcome, id: &str) -> Picture {
    let mut frame = near_undercut(outcome, snapshot);
    frame.left = 58.0;
    frame.top = 12.0;
    let mut svg = Svg::default();
    window(&mut svg, snapshot, &frame, id);
    frame.axes(&mut svg);
    Picture {
        width: 760.0,
        height: frame.top + frame.height() + 48.0,
        title: format!("Mesh at the undercut, depth (horizontal) {}", words::meters(snapshot.depth_m)),
        description: "Six-node triangles, axes in metres.".to_owned(),
        body: svg.body,
    }
}

fn whole_model(outcome: &Outcome, snapshot: &FieldSnapshot) -> Frame {
    let extent = &outcome.numerics.extent;
    let top_m = snapshot.mesh.points_m.iter().fold(outcome.section.brow[1], |top, p| top.max(p[1]));
    let x_m = [extent.seaward_x_m, extent.landward_x_m];
    let z_m = [extent.base_z_m, top_m];
    let px_per_m = (400.0 / (x_m[1] - x_m[0])).min(380.0 / (z_m[1] - z_m[0]));
    Frame { x_m, z_m, left: 58.0, top: 30.0, px_per_m }
}

fn near_undercut(outcome: &Outcome, snapshot: &FieldSnapshot) -> Frame {
    let section = &outcome.section;
    let lip = section.lip.unwrap_or(section.brow);
    let floor = section.mouth.unwrap_or(lip);
    let half_m = (1.2 * snapshot.depth_m).max(0.12 * section.cliff_height_m).max(1.0);
    let center = [lip[0] + 0.5 * snapshot.depth_m, 0.5 * (lip[1] + floor[1])];
    Frame {
        x_m: [center[0] - half_m, center[0] + half_m],
        z_m: [center[1] - half_m, center[1] + half_m],
        left: 0.0,
        top: 30.0,
        px_per_m: 340.0 / (2.0 * half_m),
    }
}

fn window(svg: &mut Svg, snapshot: &FieldSnapshot, frame: &Frame, id: &str) {
    svg.raw(&format!(
        "<defs><clipPath id=\"{id}\"><rect x=\"{}\" y=\"{}\" width=\"{}\" height=\"{}\"/></clipPath></defs>",
        short(frame.left),
        short(frame.top),
        short(frame.width()),
        short(frame.height())
    ));
    let mut sides: BTreeSet<[u32; 3]> = BTreeSet::new();
    for t in &snapshot.mesh.triangles {
        for [a, m, b] in [[t[0], t[3], t[1]], [t[1], t[4], t[2]], [t[2], t[5], t[0]]] {
            if [a, m, b].iter().any(|node| frame.shows(snapshot.mesh.points_m[*node as usize])) {
                sides.insert([a.min(b), m, a.max(b)]);
            }
        }
    }
    let mut path = String::new();
    for [a, m, b] in sides {
        let [pa, pm, pb] = [a, m, b].map(|node| frame.px(snapshot.mesh.points_m[node as usize]));
        let _ = write!(path, "M{} {}", short(pa[0]), short(pa[1]));
        let off = (pm[0] - 0.5 * (pa[0] + pb[0])).hypot(pm[1] - 0.5 * (pa[1] + pb[1]));
        if 0.2 < off {
            let _ = write!(path, "L{} {}", short(pm[0]), short(pm[1]));
        }
        let _ = write!(path, "L{} {}", short(pb[0]), short(pb[1]));
    }
    svg.raw(&format!("<g clip-path=\"url(#{id})\"><path class=\"meshline\" d=\"{path}\"/></g>"));
}
