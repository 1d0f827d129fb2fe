//! The hollow that starts on a plain face.
use super::arc::{CircleArc, Point};
use super::path::Path;
use crate::model::{BackShape, Growth};

/// The reference hollow between the face's points at floor and roof level.
///
/// "round": two quarter circles of half the height; "square": a vertical back; "wedge": two straight lines at 45 degrees. With
/// "advance" the reference has straight floor and roof of half the height before its back, with "stretch" none.
pub(crate) fn hollow(mouth: Point, lip: Point, back: BackShape, growth: Growth) -> Path {
    let radius = 0.5 * (lip[1] - mouth[1]);
    let straight = if growth == Growth::Advance { radius } else { 0.0 };
    let (x, middle) = (lip[0] + straight, 0.5 * (lip[1] + mouth[1]));
    let mut path = Path::straight(vec![mouth]);
    let mut to = |point: Point, arc: Option<CircleArc>| {
        if path.points_m().last() != Some(&point) {
            path.push(point, arc);
        }
    };
    let tip = [x + radius, middle];
    match back {
        BackShape::Round => {
            let circle = Some(CircleArc { center_m: [x, middle], radius_m: radius });
            to([x, mouth[1]], None);
            to(tip, circle);
            to([x, lip[1]], circle);
        }
        BackShape::Square => {
            to([tip[0], mouth[1]], None);
            to([tip[0], lip[1]], None);
        }
        BackShape::Wedge => {
            to([x, mouth[1]], None);
            to(tip, None);
            to([x, lip[1]], None);
        }
    }
    to(lip, None);
    path
}
