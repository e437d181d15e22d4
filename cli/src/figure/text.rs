//! Lettering: how wide a text runs, breaking into lines, and sub- and superscripts.
//!
//! The reader's machine picks the typeface, so widths are taken from a wide one (rounded up from
//! DejaVu Sans); narrower faces leave a little air.

/// Faces in order of preference; all are common sans-serif ones.
pub const FACES: &str = "Helvetica, Arial, 'Liberation Sans', 'DejaVu Sans', sans-serif";

/// Millimetres in one printer's point.
pub const POINT: f64 = 25.4 / 72.0;
/// Size of titles, mm: 9 pt.
pub const TITLE: f64 = 9.0 * POINT;
/// Size of labels and tables, mm: 8 pt.
pub const LABEL: f64 = 8.0 * POINT;
/// Size of footnotes, scales and subtitles, mm: 7 pt.
pub const SMALL: f64 = 7.0 * POINT;

/// Size of a subscript over that of its line.
const SUBSCRIPT: f64 = 0.75;

/// A stretch of text on the line, or below it.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Run {
    /// The characters.
    pub text: String,
    /// Whether it is a subscript.
    pub sub: bool,
}

/// Splits `I_x = 3` into runs: letters and digits after an underscore are a subscript.
#[must_use]
pub fn runs(text: &str) -> Vec<Run> {
    let mut runs: Vec<Run> = Vec::new();
    let mut sub = false;
    for c in text.chars() {
        if c == '_' && !sub {
            sub = true;
            runs.push(Run {
                text: String::new(),
                sub,
            });
            continue;
        }
        if sub && !c.is_alphanumeric() {
            sub = false;
        }
        match runs.last_mut() {
            Some(run) if run.sub == sub => run.text.push(c),
            _ => runs.push(Run {
                text: c.into(),
                sub,
            }),
        }
    }
    runs
}

/// Width of a text at a size, both in mm.
#[must_use]
pub fn width(text: &str, size: f64, bold: bool) -> f64 {
    let em: f64 = text.chars().map(advance).sum();
    em * size * if bold { 1.12 } else { 1.0 }
}

/// Width of runs.
#[must_use]
pub fn runs_width(runs: &[Run], size: f64, bold: bool) -> f64 {
    runs.iter()
        .map(|r| width(&r.text, if r.sub { SUBSCRIPT * size } else { size }, bold))
        .sum()
}

/// Advance over the size of the type.
fn advance(c: char) -> f64 {
    match c {
        'i' | 'j' | 'l' | '\'' => 0.28,
        ' ' | '\u{a0}' | '.' | ',' | '·' => 0.32,
        ':' | ';' | '|' | 'I' | '/' => 0.34,
        '(' | ')' | '-' | 't' | 'f' | 'r' | '[' | ']' => 0.42,
        '⁰'..='⁹' | '¹' | '²' | '³' | '⁻' => 0.46,
        '°' | '"' => 0.5,
        's' | 'c' | 'z' | 'v' | 'x' | 'y' | 'k' => 0.6,
        'a' | 'b' | 'd' | 'e' | 'g' | 'h' | 'n' | 'o' | 'p' | 'q' | 'u' | '0'..='9' => 0.64,
        'm' | '—' | '…' | '∞' => 1.0,
        'w' => 0.82,
        'M' | 'W' | '%' | '@' => 1.0,
        'A'..='Z' => 0.77,
        '−' | '±' | '×' | '=' | '+' | '<' | '>' | '≤' | '≥' | '→' => 0.84,
        'α'..='ω' => 0.84,
        // East Asian characters are square; whatever else there is has been given the same room.
        _ => 1.0,
    }
}

/// Breaks a text between words into lines no wider than `limit`; a single word that is wider is cut.
#[must_use]
pub fn wrap(text: &str, size: f64, limit: f64) -> Vec<String> {
    let mut lines: Vec<String> = Vec::new();
    let mut line = String::new();
    let breaks = |c: char| c.is_whitespace() && c != '\u{a0}';
    for word in text.split(breaks).filter(|word| !word.is_empty()) {
        let longer = if line.is_empty() {
            word.to_string()
        } else {
            format!("{line} {word}")
        };
        if width(&longer, size, false) <= limit {
            line = longer;
        } else {
            if !line.is_empty() {
                lines.push(std::mem::take(&mut line));
            }
            line = shorten(word, size, false, limit);
        }
    }
    if !line.is_empty() {
        lines.push(line);
    }
    lines
}

/// The text, its end replaced by `…` if it is wider than `limit`.
#[must_use]
pub fn shorten(text: &str, size: f64, bold: bool, limit: f64) -> String {
    if width(text, size, bold) <= limit {
        return text.into();
    }
    let mut short = String::new();
    for c in text.chars() {
        short.push(c);
        if width(&format!("{short}…"), size, bold) > limit {
            short.pop();
            break;
        }
    }
    format!("{}…", short.trim_end())
}

/// Characters that mean something to XML, and those that it forbids.
#[must_use]
pub fn escape(text: &str) -> String {
    let mut out = String::with_capacity(text.len());
    for c in text.chars() {
        match c {
            '&' => out.push_str("&amp;"),
            '<' => out.push_str("&lt;"),
            '>' => out.push_str("&gt;"),
            '"' => out.push_str("&quot;"),
            '\t' | '\n' | '\r' => out.push(' '),
            c if c.is_control() || matches!(c, '\u{fffe}' | '\u{ffff}') => out.push('\u{fffd}'),
            c => out.push(c),
        }
    }
    out
}

/// The inside of a `<text>` element: subscripts smaller and lower.
#[must_use]
pub fn markup(runs: &[Run], size: f64) -> String {
    let mut out = String::new();
    let mut low = false;
    for run in runs {
        let text = escape(&run.text).replace("  ", "\u{a0} ");
        let down = 0.25 * size;
        match (low, run.sub) {
            (false, false) => out.push_str(&text),
            (true, false) => {
                // Readers drop the space that begins an element: it is made by moving on.
                let bare = text.trim_start_matches([' ', '\u{a0}']);
                let shift = if bare == text { 0.05 } else { 0.32 };
                out.push_str(&format!(
                    r#"<tspan dx="{:.2}" dy="{:.2}">{bare}</tspan>"#,
                    shift * size,
                    -down
                ));
            }
            (_, true) => out.push_str(&format!(
                r#"<tspan dy="{:.2}" font-size="{:.2}">{text}</tspan>"#,
                if low { 0.0 } else { down },
                SUBSCRIPT * size
            )),
        }
        low = run.sub;
    }
    out
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn subscripts_end_with_the_word() {
        let parts = runs("x_s = 3, I_xy");
        let texts: Vec<(&str, bool)> = parts.iter().map(|r| (r.text.as_str(), r.sub)).collect();
        assert_eq!(
            texts,
            [("x", false), ("s", true), (" = 3, I", false), ("xy", true)]
        );
    }

    #[test]
    fn markup_returns_to_the_line() {
        let text = markup(&runs("x_s <"), 2.0);
        assert_eq!(
            text,
            r#"x<tspan dy="0.50" font-size="1.50">s</tspan><tspan dx="0.64" dy="-0.50">&lt;</tspan>"#
        );
    }

    #[test]
    fn wrapped_lines_fit_and_lose_no_word() {
        let text = "The quick brown fox jumps over the lazy dog";
        let lines = wrap(text, SMALL, 25.0);
        assert!(lines.len() > 1);
        assert!(lines.iter().all(|l| width(l, SMALL, false) <= 25.0));
        assert_eq!(lines.join(" "), text);
    }

    #[test]
    fn shortened_text_fits() {
        let text = shorten("An uncommonly long title of a section", TITLE, true, 30.0);
        assert!(text.ends_with('…') && width(&text, TITLE, true) <= 30.0);
        assert_eq!(shorten("short", TITLE, true, 30.0), "short");
    }

    #[test]
    fn xml_stays_well_formed() {
        assert_eq!(
            escape("a<b & \"c\"\u{1}\n"),
            "a&lt;b &amp; &quot;c&quot;\u{fffd} "
        );
    }
}
