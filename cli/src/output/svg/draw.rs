//! Writing SVG: escaped text, few numbers, classes instead of colors in the marks.
use std::fmt::Write;

/// A finished picture.
#[derive(Debug, Clone, PartialEq)]
pub struct Picture {
    /// Width, px.
    pub width: f64,
    /// Height, px.
    pub height: f64,
    /// What it shows, in one sentence.
    pub title: String,
    /// The same in words for who cannot see it.
    pub description: String,
    /// Marks.
    pub body: String,
}

impl Picture {
    /// As an element to be set into a page that holds [`STYLE`].
    pub fn inline(&self) -> String {
        format!(
            "<svg class=\"picture\" viewBox=\"0 0 {} {}\" role=\"img\" aria-label=\"{}\" xmlns=\"http://www.w3.org/2000/svg\"><desc>{}</desc>{}</svg>",
            short(self.width),
            short(self.height),
            escape(&self.title),
            escape(&self.description),
            self.body
        )
    }

    /// As a file.
    pub fn file(&self) -> String {
        format!(
            "<?xml version=\"1.0\" encoding=\"UTF-8\"?>\n<svg viewBox=\"0 0 {0} {1}\" width=\"{0}\" height=\"{1}\" \
             xmlns=\"http://www.w3.org/2000/svg\"><title>{2}</title><desc>{3}</desc><style>{STYLE}</style>\
             <rect class=\"paper\" width=\"{0}\" height=\"{1}\"/>{4}</svg>\n",
            short(self.width),
            short(self.height),
            escape(&self.title),
            escape(&self.description),
            self.body
        )
    }
}

/// Looks of all pictures.
pub const STYLE: &str = include_str!("style.css");

/// Where a text hangs on its point.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Anchor {
    /// Starts there.
    Start,
    /// Is centered there.
    Middle,
    /// Ends there.
    End,
}

/// Marks being collected.
#[derive(Debug, Clone, Default)]
pub struct Svg {
    /// The marks so far.
    pub body: String,
}

impl Svg {
    /// Adds marks as they are.
    pub fn raw(&mut self, marks: &str) {
        self.body.push_str(marks);
    }

    /// A straight line.
    pub fn line(&mut self, [a, b]: [[f64; 2]; 2], class: &str) {
        let _ = write!(
            self.body,
            "<line class=\"{class}\" x1=\"{}\" y1=\"{}\" x2=\"{}\" y2=\"{}\"/>",
            short(a[0]),
            short(a[1]),
            short(b[0]),
            short(b[1])
        );
    }

    /// A rectangle `[x, y, width, height]`.
    pub fn rect(&mut self, [x, y, w, h]: [f64; 4], class: &str) {
        let _ = write!(
            self.body,
            "<rect class=\"{class}\" x=\"{}\" y=\"{}\" width=\"{}\" height=\"{}\"/>",
            short(x),
            short(y),
            short(w),
            short(h)
        );
    }

    /// A rectangle with a color.
    pub fn swatch(&mut self, [x, y, w, h]: [f64; 4], fill: &str) {
        let _ = write!(
            self.body,
            "<rect x=\"{}\" y=\"{}\" width=\"{}\" height=\"{}\" fill=\"{fill}\"/>",
            short(x),
            short(y),
            short(w),
            short(h)
        );
    }

    /// A circle.
    pub fn circle(&mut self, at: [f64; 2], radius: f64, class: &str) {
        let _ = write!(self.body, "<circle class=\"{class}\" cx=\"{}\" cy=\"{}\" r=\"{}\"/>", short(at[0]), short(at[1]), short(radius));
    }

    /// An open polyline.
    pub fn polyline(&mut self, points: &[[f64; 2]], class: &str) {
        let _ = write!(self.body, "<path class=\"{class}\" d=\"{}\"/>", path_of(points, false));
    }

    /// A closed polygon.
    pub fn polygon(&mut self, points: &[[f64; 2]], class: &str) {
        let _ = write!(self.body, "<path class=\"{class}\" d=\"{}\"/>", path_of(points, true));
    }

    /// A text; `text` is escaped.
    pub fn text(&mut self, at: [f64; 2], anchor: Anchor, class: &str, text: &str) {
        let anchor = match anchor {
            Anchor::Start => "",
            Anchor::Middle => " text-anchor=\"middle\"",
            Anchor::End => " text-anchor=\"end\"",
        };
        let _ = write!(self.body, "<text class=\"{class}\" x=\"{}\" y=\"{}\"{anchor}>{}</text>", short(at[0]), short(at[1]), escape(text));
    }

    /// A text that runs upward, centered.
    pub fn text_up(&mut self, at: [f64; 2], class: &str, text: &str) {
        let (x, y) = (short(at[0]), short(at[1]));
        let _ = write!(
            self.body,
            "<text class=\"{class}\" x=\"{x}\" y=\"{y}\" text-anchor=\"middle\" transform=\"rotate(-90 {x} {y})\">{}</text>",
            escape(text)
        );
    }

    /// A dimension line with end ticks.
    pub fn dimension(&mut self, [a, b]: [[f64; 2]; 2], class: &str) {
        self.line([a, b], class);
        for at in [a, b] {
            self.line([[at[0], at[1] - 5.0], [at[0], at[1] + 5.0]], class);
        }
    }
}

/// A path through points.
pub fn path_of(points: &[[f64; 2]], closed: bool) -> String {
    let mut path = String::new();
    for (i, point) in points.iter().enumerate() {
        let _ = write!(path, "{}{} {}", if i == 0 { "M" } else { "L" }, short(point[0]), short(point[1]));
    }
    if closed {
        path.push('Z');
    }
    path
}

/// A pixel number with at most one decimal.
pub fn short(value: f64) -> String {
    let text = format!("{value:.1}");
    text.strip_suffix(".0").map_or(text.clone(), |whole| if whole == "-0" { "0".to_owned() } else { whole.to_owned() })
}

/// Text for markup.
pub fn escape(text: &str) -> String {
    let mut out = String::with_capacity(text.len());
    for c in text.chars() {
        match c {
            '&' => out.push_str("&amp;"),
            '<' => out.push_str("&lt;"),
            '>' => out.push_str("&gt;"),
            '"' => out.push_str("&quot;"),
            '\'' => out.push_str("&#39;"),
            c if c.is_control() => out.push(' '),
            c => out.push(c),
        }
    }
    out
}

#[cfg(test)]
mod tests {
    use super::{Picture, escape, short};

    #[test]
    fn text_never_becomes_markup() {
        assert_eq!(escape("<a href='x'>&\"\u{7}"), "&lt;a href=&#39;x&#39;&gt;&amp;&quot; ");
        let picture = Picture { width: 1.0, height: 1.0, title: "<script>".into(), description: String::new(), body: String::new() };
        assert!(!picture.inline().contains("<script>") && !picture.file().contains("<script>"));
    }

    #[test]
    fn pixels_are_short() {
        assert_eq!([short(12.04), short(-0.01), short(3.27)], ["12", "0", "3.3"]);
    }
}
