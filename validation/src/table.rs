//! The comparison as a Markdown table.

use std::fmt::Write;

use sectile_solver::figure::Trust;

use crate::cases::Status;
use crate::verdict::Row;

/// The table of the rows that `wanted` picks (case, source, published, ours, bounds); below it every
/// known difference with its reason, and the sources spelled out.
#[must_use]
pub fn markdown(rows: &[Row], wanted: impl Fn(&Row) -> bool) -> String {
    let mut out = String::from(
        "| case | quantity | source | published | ours | bounds |\n| --- | --- | --- | ---: | ---: | --- |\n",
    );
    let mut sources: Vec<&str> = Vec::new();
    for row in rows.iter().filter(|r| wanted(r)) {
        let c = &row.claim;
        let quantity = match c.over {
            Some(over) => format!("{}/{}", c.quantity.symbol(), over.symbol()),
            None => c.quantity.symbol().to_owned(),
        };
        let nu = if depends_on_nu(&quantity) {
            format!(", ν = {}", c.nu)
        } else {
            String::new()
        };
        let numbers: Vec<String> = c
            .source
            .iter()
            .map(|s| format!("[{}]", index_of(&mut sources, s)))
            .collect();
        // Writing to a String cannot fail.
        let _ = writeln!(
            out,
            "| {}{nu} | {quantity} | {}, {} | {} | {} | {} |",
            row.title,
            c.status.word(),
            numbers.join(" "),
            published(row),
            number(row.figure.value, digits(row)),
            bounds(row),
        );
    }
    let known: Vec<&Row> = rows
        .iter()
        .filter(|r| r.claim.known_failure.is_some())
        .collect();
    if !known.is_empty() {
        out.push_str("\nKnown differences:\n\n");
    }
    for row in known {
        let _ = writeln!(
            out,
            "- {}, {} [{}]: {}.",
            row.title,
            row.claim.quantity.symbol(),
            index_of(&mut sources, &row.claim.source[0]),
            row.claim.known_failure.as_deref().unwrap_or_default(),
        );
    }
    out.push_str("\nSources:\n\n");
    for (i, source) in sources.iter().enumerate() {
        let _ = writeln!(out, "{}. {source}", i + 1);
    }
    out
}

/// Number of a source in the list, from 1; appended where it is new.
fn index_of<'a>(sources: &mut Vec<&'a str>, source: &'a str) -> usize {
    match sources.iter().position(|s| *s == source) {
        Some(i) => i + 1,
        None => {
            sources.push(source);
            sources.len()
        }
    }
}

fn depends_on_nu(symbol: &str) -> bool {
    ["κ", "x_f", "y_f", "A_s"]
        .iter()
        .any(|s| symbol.starts_with(s))
}

/// The printed value in the unit of the outline.
fn published(row: &Row) -> String {
    let c = &row.claim;
    if c.value.to_string() == c.printed || c.status == Status::Exact {
        number(c.value, 12)
    } else {
        let places = c.printed.split(['e', 'E']).next().unwrap_or("");
        let digits = places
            .trim_start_matches(['-', '0', '.'])
            .chars()
            .filter(char::is_ascii_digit)
            .count();
        number(c.value, digits.max(1))
    }
}

/// Significant digits that the enclosure supports, and one more.
fn digits(row: &Row) -> usize {
    let (half, value) = (row.figure.half_width(), row.figure.value.abs());
    if value == 0.0 || half == 0.0 {
        return 12;
    }
    ((value / half).log10().ceil() as usize + 1).clamp(3, 12)
}

fn bounds(row: &Row) -> String {
    let half = row.figure.half_width();
    match row.figure.trust {
        Trust::Exact => "exact".into(),
        Trust::Bounded => format!("± {half:.1e}"),
        Trust::Estimated => format!("± {half:.1e} (estimated)"),
    }
}

/// `value` to `digits` significant digits, with a power of ten where that is shorter.
#[must_use]
pub fn number(value: f64, digits: usize) -> String {
    if value == 0.0 {
        return "0".into();
    }
    let scientific = format!("{value:.*e}", digits.saturating_sub(1));
    let exponent: i32 = scientific
        .split_once('e')
        .and_then(|(_, e)| e.parse().ok())
        .unwrap_or(0);
    if (-4..9).contains(&exponent) {
        let decimals = (digits as i32 - 1 - exponent).max(0) as usize;
        let text = format!("{value:.decimals$}");
        // Zeros behind the point are kept only where the digits were asked for to tell accuracy.
        if digits >= 12 && text.contains('.') {
            return text.trim_end_matches('0').trim_end_matches('.').to_owned();
        }
        text
    } else {
        scientific
    }
}

/// What the rows come to, in one paragraph.
#[must_use]
pub fn summary(rows: &[Row], tolerance: f64) -> String {
    let count = |f: &dyn Fn(&Row) -> bool| rows.iter().filter(|r| f(r)).count();
    let mut cases: Vec<&str> = rows.iter().map(|r| r.case.as_str()).collect();
    cases.dedup();
    let exact = |trust: Trust| {
        let all = count(&|r| r.claim.status == Status::Exact && r.figure.trust == trust);
        let held =
            count(&|r| r.claim.status == Status::Exact && r.figure.trust == trust && r.holds());
        format!("{held} of {all}")
    };
    format!(
        "{} sections, {} values compared at a tolerance of {tolerance:e}. Of the exact ones {} lie inside \
         bounds that are guaranteed, {} inside bounds that are estimated and {} inside the rounding of a \
         closed form; {} known differences are listed with their reason.",
        cases.len(),
        rows.len(),
        exact(Trust::Bounded),
        exact(Trust::Estimated),
        exact(Trust::Exact),
        count(&|r| r.claim.known_failure.is_some()),
    )
}

#[cfg(test)]
mod tests {
    use super::number;

    #[test]
    fn numbers_keep_the_digits_asked_for() {
        assert_eq!(number(115_811.016_4, 9), "115811.016");
        assert_eq!(number(0.14, 12), "0.14");
        assert_eq!(number(0.140_577_014_955, 6), "0.140577");
        assert_eq!(number(1.379e10, 4), "1.379e10");
        assert_eq!(number(0.0, 5), "0");
    }
}
