//! Files that are damaged at random: never a panic, and never a number that is not one.
use super::csv_files::GOOD;
use super::*;

/// Damaged files of each kind; the fuzz targets try millions, this keeps their finds from coming back.
const ROUNDS: u64 = 4_000;

/// A small generator of its own: Knuth's linear congruential constants, the high bits used.
struct Dice(u64);

impl Dice {
    fn roll(&mut self, below: usize) -> usize {
        self.0 = self.0.wrapping_mul(6364136223846793005).wrapping_add(1442695040888963407);
        usize::try_from(self.0 >> 33).unwrap() % below
    }
}

fn damage(bytes: &[u8], dice: &mut Dice) -> Vec<u8> {
    const PIECES: [&[u8]; 16] =
        [b"\"", b",", b"\n", b"\r", b"GROUP", b"UNIT", b"nan", b"-1", b"1e999", b"", b"\xff", b"\0", b";", b"0", b"kPa", b"\"\"\""];
    let mut out = bytes.to_vec();
    for _ in 0..=dice.roll(4) {
        let from = dice.roll(out.len() + 1);
        let to = (from + dice.roll(12)).min(out.len());
        out.splice(from..to, PIECES[dice.roll(PIECES.len())].iter().copied());
    }
    if dice.roll(8) == 0 {
        out.truncate(dice.roll(out.len() + 1));
    }
    out
}

fn survives(bytes: &[u8]) {
    let Ok(file) = read(bytes) else { return };
    let Ok(summary) = summary(&file.value.results, None) else { return };
    let printed = text::summary(&summary.value).unwrap();
    let table = rock_table("x", "x", &summary.value);
    assert!(!printed.contains("NaN") && !table.contains("NaN"), "{printed}{table}");
    assert!(table.parse::<toml::Table>().is_ok(), "{table}");
    let _ = plot::svg(&summary.value, "x").unwrap();
}

#[test]
fn damaged_files_are_refused_or_read_but_never_panic() {
    let ags = super::ags_files::good_text();
    let mut dice = Dice(7);
    for _ in 0..ROUNDS {
        survives(&damage(GOOD.as_bytes(), &mut dice));
        survives(&damage(ags.as_bytes(), &mut dice));
    }
}
