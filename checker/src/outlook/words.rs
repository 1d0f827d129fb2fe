//! Chances in words that a layman understands.

/// Below this a number would claim more than any model of this kind knows.
pub const LEAST_SAID: f64 = 1e-4;
/// From here on tenths would read as certainty.
const NEARLY_CERTAIN: f64 = 0.95;

/// "about 1 in 500", to one figure; from 15 % on "about 4 in 10"; under 1 in 10,000 no number.
///
/// Anything that is not a chance between 0 and 1 reads "not known".
pub fn chance_in_words(chance: f64) -> String {
    if !(0.0..=1.0).contains(&chance) {
        return "not known".to_owned();
    }
    if chance < LEAST_SAID {
        return "less than 1 in 10,000 by this model; other causes dominate".to_owned();
    }
    if NEARLY_CERTAIN <= chance { "nearly certain by this model".to_owned() } else { format!("about {}", plain(chance)) }
}

/// The chance with the range "on what we do not know": "about 1 in 500 (1 in 100 to 1 in 5,000 on what we do not know)".
///
/// `range` is the chance at both ends of what is not known, in any order.
pub fn chance_with_range(chance: f64, range: [f64; 2]) -> String {
    let words = chance_in_words(chance);
    let both = range.iter().all(|r| (0.0..=1.0).contains(r));
    if chance < LEAST_SAID || !both {
        return words;
    }
    let (likelier, rarer) = (range[0].max(range[1]), range[0].min(range[1]));
    let end = |r: f64| if r < LEAST_SAID { "less than 1 in 10,000".to_owned() } else { plain(r) };
    format!("{words} ({} to {} on what we do not know)", end(likelier), end(rarer))
}

/// "1 in 500" or "4 in 10".
fn plain(chance: f64) -> String {
    if NEARLY_CERTAIN <= chance {
        "nearly certain".to_owned()
    } else if 0.15 <= chance {
        format!("{} in 10", (10.0 * chance).round())
    } else {
        let one_in = 1.0 / chance;
        let unit = 10_f64.powf(one_in.log10().floor());
        format!("1 in {}", thousands((one_in / unit).round() * unit))
    }
}

/// A whole number with commas between thousands.
fn thousands(value: f64) -> String {
    let digits = format!("{value:.0}");
    let mut text = String::new();
    for (i, digit) in digits.chars().enumerate() {
        if 0 < i && (digits.len() - i).is_multiple_of(3) {
            text.push(',');
        }
        text.push(digit);
    }
    text
}

#[cfg(test)]
mod tests;
