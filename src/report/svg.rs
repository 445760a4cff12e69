//! Small helpers for hand-written SVG: coordinates, escaping, elements. Colours come from the page's style sheet
//! by class, so that one drawing serves light and dark.

/// A coordinate with one decimal and no trailing zero; what is not a number becomes 0 and must be filtered before.
pub fn coord(v: f64) -> String {
    if !v.is_finite() {
        return "0".into();
    }
    let tenths = (v * 10.0).round() / 10.0 + 0.0;
    format!("{tenths}")
}

/// Text fit for SVG or HTML, in elements and in quoted attributes.
///
/// ```
/// use tailchase::report::svg::escape;
/// assert_eq!(escape("O'<b>\"&"), "O&#39;&lt;b&gt;&quot;&amp;");
/// ```
pub fn escape(text: &str) -> String {
    let mut out = String::with_capacity(text.len());
    for c in text.chars() {
        match c {
            '&' => out += "&amp;",
            '<' => out += "&lt;",
            '>' => out += "&gt;",
            '"' => out += "&quot;",
            '\'' => out += "&#39;",
            c => out.push(c),
        }
    }
    out
}

/// The opening of a drawing that says to every reader what it is.
pub fn open(class: &str, width: f64, height: f64, title: &str) -> String {
    format!(
        "<svg class=\"{class}\" viewBox=\"0 0 {w} {h}\" width=\"{w}\" height=\"{h}\" role=\"img\" aria-label=\"{t}\"><title>{t}</title>",
        w = coord(width),
        h = coord(height),
        t = escape(title)
    )
}

pub fn line(class: &str, from: (f64, f64), to: (f64, f64)) -> String {
    format!("<path class=\"{class}\" d=\"M{} {}L{} {}\"/>", coord(from.0), coord(from.1), coord(to.0), coord(to.1))
}

pub fn rect(class: &str, x: f64, y: f64, width: f64, height: f64) -> String {
    format!(
        "<rect class=\"{class}\" x=\"{}\" y=\"{}\" width=\"{}\" height=\"{}\"/>",
        coord(x),
        coord(y),
        coord(width.max(0.0)),
        coord(height.max(0.0))
    )
}

pub fn circle(class: &str, at: (f64, f64), radius: f64) -> String {
    format!("<circle class=\"{class}\" cx=\"{}\" cy=\"{}\" r=\"{}\"/>", coord(at.0), coord(at.1), coord(radius))
}

/// A polyline that breaks where a point is missing or not a number; a lone point is drawn as a dot of the line's
/// width. Empty when there is nothing to draw.
pub fn polyline(class: &str, points: impl IntoIterator<Item = Option<(f64, f64)>>) -> String {
    let mut d = String::new();
    let mut run = 0;
    let close = |d: &mut String, run: usize| {
        if run == 1 {
            d.push_str("h0");
        }
    };
    for point in points {
        match point.filter(|(x, y)| x.is_finite() && y.is_finite()) {
            Some((x, y)) => {
                d.push_str(if run == 0 { "M" } else { "L" });
                d.push_str(&format!("{} {}", coord(x), coord(y)));
                run += 1;
            }
            None => {
                close(&mut d, run);
                run = 0;
            }
        }
    }
    close(&mut d, run);
    if d.is_empty() { d } else { format!("<path class=\"{class}\" d=\"{d}\"/>") }
}

/// A filled band between low and high at each x; breaks where either is missing.
pub fn band(class: &str, points: &[Option<(f64, f64, f64)>]) -> String {
    let mut d = String::new();
    for run in points.split(Option::is_none).filter(|r| r.len() > 1) {
        let run: Vec<(f64, f64, f64)> = run.iter().copied().flatten().collect();
        let upper = run.iter().map(|p| (p.0, p.2));
        let lower = run.iter().rev().map(|p| (p.0, p.1));
        for (i, (x, y)) in upper.chain(lower).enumerate() {
            d.push_str(if i == 0 { "M" } else { "L" });
            d.push_str(&format!("{} {}", coord(x), coord(y)));
        }
        d.push('Z');
    }
    if d.is_empty() { d } else { format!("<path class=\"{class}\" d=\"{d}\"/>") }
}

/// Where a text is held.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Anchor {
    Start,
    Middle,
    End,
}

pub fn text(class: &str, at: (f64, f64), anchor: Anchor, words: &str) -> String {
    let anchor = match anchor {
        Anchor::Start => "start",
        Anchor::Middle => "middle",
        Anchor::End => "end",
    };
    format!("<text class=\"{class}\" x=\"{}\" y=\"{}\" text-anchor=\"{anchor}\">{}</text>", coord(at.0), coord(at.1), escape(words))
}
