use super::*;

#[test]
fn positions_count_characters_from_one() {
    let text = "a = 1\nÜber = [2,\n3]\n";
    assert_eq!(position(text, 0), Position { line: 1, column: 1 });
    let two = text.find('2').unwrap();
    assert_eq!(position(text, two), Position { line: 2, column: 9 });
    assert_eq!(position(text, text.len() + 50), Position { line: 4, column: 1 });
}

#[test]
fn control_characters_never_reach_the_terminal() {
    assert_eq!(clean("a\u{1b}[31mb\u{202e}c\td\r\n"), "a[31mbc d  ");
    let text = "x = \"\u{1b}[2J\"";
    let shown = excerpt(text, 4, text.len());
    assert!(!shown.text.contains('\u{1b}'));
    assert_eq!(&shown.text[shown.from..shown.to], "\"\u{fffd}[2J\"");
}

#[test]
fn a_long_line_is_cut_around_its_place() {
    let text = format!("{}BAD{}", "é".repeat(5000), "z".repeat(5000));
    let shown = excerpt(&text, 10_000, 10_003);
    assert!(shown.text.chars().count() < 300);
    assert_eq!(&shown.text[shown.from..shown.to], "BAD");
    assert_eq!(shown.position, Position { line: 1, column: 5001 });
}

#[test]
fn an_excerpt_ends_with_its_line() {
    let shown = excerpt("a\nbc = [\n1,\n2]\n", 7, 13);
    assert_eq!(shown.text, "bc = [");
    assert_eq!(&shown.text[shown.from..shown.to], "[");
}
