//! Sentences for people: headline and cautions. Never the word for a cliff that cannot fall.
use crate::outcome::{CheckResult, CriticalDepth};

/// The usual cautions, shown wherever results are shown.
pub const CAUTIONS: [&str; 7] = [
    "This result supports, and does not replace, site investigation, local codes and the judgment of a licensed practitioner.",
    "Keep people off and from under an overhang that is being assessed.",
    "Under its limit means under its limit by this model; the overhang may still fall.",
    "Plane strain overstates the demand on a short cavern, whose side walls arch the load, and understates it on a corner, stack or arch.",
    "Strengths of intact specimens overstate a rock mass: overhangs of limestone that fell had mobilized some 5 to 30 % of them.",
    "Joints that were not seen govern many collapses; linear elasticity has no redistribution after the first crack.",
    "Not calculated: wave impact and air pressure in the hollow, beach level, seepage and piping, frost, roots, run-out, and falls of single blocks, which come far more often than a collapse.",
];

/// One sentence on today's state.
pub fn today(depth_m: f64, worst: Option<&CheckResult>, required_reserve: f64) -> String {
    let Some(worst) = worst else {
        return format!("At the surveyed undercut depth (horizontal) of {depth_m:.2} m no check could be made");
    };
    let limit = 1.0 / required_reserve;
    let name = format!("{} in {} ({})", worst.check, worst.rock, worst.situation);
    match worst.utilization {
        Some(u) if worst.over => format!(
            "At the surveyed undercut depth (horizontal) of {depth_m:.2} m {name} is OVER its limit: utilization {u:.2} against {limit:.2}; \
             treat the overhang as able to fall now"
        ),
        Some(u) => format!(
            "At the surveyed undercut depth (horizontal) of {depth_m:.2} m the worst check, {name}, stands at utilization {u:.2} against its limit \
             {limit:.2}"
        ),
        None => format!(
            "At the surveyed undercut depth (horizontal) of {depth_m:.2} m {name} has no capacity left; treat the overhang as able to fall now"
        ),
    }
}

/// One sentence on the critical depth.
pub fn critical(critical: &CriticalDepth, inputs: &str) -> String {
    match (critical.depth_m, critical.check) {
        (Some(depth), Some(check)) => {
            let error = critical.error_m.map_or_else(String::new, |e| format!(" (numerical error {e:.2} m)"));
            let lost =
                critical.ground_lost_m.map_or_else(String::new, |g| format!(", and about {g:.1} m of ground behind the brow goes with it"));
            format!("with {inputs} inputs {check} goes over its limit at an undercut depth of {depth:.2} m{error}{lost}")
        }
        _ => format!("with {inputs} inputs no check goes over its limit down to {:.1} m; nothing is known beyond", critical.searched_to_m),
    }
}

/// The headline: today, the critical depth, and the reservation.
pub fn headline(today: &str, critical_sentence: Option<&str>) -> String {
    let reservation = "by this model, which does not know joints that were not seen; it may still fall earlier";
    critical_sentence.map_or_else(|| format!("{today}: {reservation}."), |c| format!("{today}; {c}: {reservation}."))
}

/// Reason shown where depths beyond the searched ones are meant.
pub fn not_reached(searched_to_m: f64) -> String {
    format!("not reached down to {searched_to_m:.1} m; nothing is known beyond")
}
