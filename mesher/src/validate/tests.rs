use super::*;
use crate::outline::Arc;

fn refusal(line: Line, size: &SizeField) -> String {
    validate(&Outline { lines: vec![line] }, size, &MeshParams::default()).unwrap_err().to_string()
}

fn square() -> Line {
    Line::ring(vec![[0.0, 0.0], [1.0, 0.0], [1.0, 1.0], [0.0, 1.0]], 7)
}

#[test]
fn faults_are_named_with_their_place() {
    let size = SizeField::uniform(0.5);
    let mut line = square();
    line.points_m[2][1] = f64::NAN;
    assert_eq!(refusal(line, &size), "line 0 (tag 7): point 2 is at (1, NaN) m");

    let mut line = square();
    line.arcs = vec![None; 2];
    assert_eq!(refusal(line, &size), "line 0 (tag 7) has 2 entries for arcs and 4 segments");

    let mut line = square();
    line.arcs = vec![None, Some(Arc { center_m: [0.0, 0.5], radius_m: 2.0 }), None, None];
    assert!(refusal(line, &size).starts_with("line 0 (tag 7): segment 1 ends 0.88"), "radius 2 against a distance of 1.118");

    assert_eq!(refusal(Line::chain(vec![[1.0, 2.0]], 1), &size), "the outline has no segment");
    assert_eq!(refusal(Line::chain(vec![[1.0, 2.0], [1.0, 2.0]], 1), &size), "the outline has no segment");
}

#[test]
fn sizes_and_settings_out_of_range_are_refused() {
    assert_eq!(refusal(square(), &SizeField::uniform(0.0)), "the largest size in m must be positive, got 0");
    assert_eq!(refusal(square(), &SizeField::uniform(f64::NAN)), "the largest size in m must be positive, got NaN");
    let outline = Outline { lines: vec![square()] };
    let steep = MeshParams { smallest_angle_rad: 0.6, ..MeshParams::default() };
    let message = validate(&outline, &SizeField::uniform(1.0), &steep).unwrap_err().to_string();
    assert_eq!(message, "the smallest angle in degrees must be from 0 to 30, got 34.37746770784939");
}
