use super::{chance_in_words, chance_with_range};

#[test]
fn chances_are_said_to_one_figure() {
    for (chance, words) in [
        (0.99, "nearly certain by this model"),
        (0.42, "about 4 in 10"),
        (0.11, "about 1 in 9"),
        (0.0499, "about 1 in 20"),
        (0.0021, "about 1 in 500"),
        (0.00023, "about 1 in 4,000"),
        (1e-4, "about 1 in 10,000"),
        (9.9e-5, "less than 1 in 10,000 by this model; other causes dominate"),
        (0.0, "less than 1 in 10,000 by this model; other causes dominate"),
        (f64::NAN, "not known"),
        (1.2, "not known"),
    ] {
        assert_eq!(chance_in_words(chance), words, "{chance}");
    }
}

#[test]
fn the_range_is_what_we_do_not_know() {
    assert_eq!(chance_with_range(0.002, [0.0002, 0.01]), "about 1 in 500 (1 in 100 to 1 in 5,000 on what we do not know)");
    assert_eq!(chance_with_range(0.002, [1e-6, 0.3]), "about 1 in 500 (3 in 10 to less than 1 in 10,000 on what we do not know)");
    assert_eq!(chance_with_range(0.002, [f64::NAN, 0.3]), "about 1 in 500");
}
