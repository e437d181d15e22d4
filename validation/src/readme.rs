//! Puts the table between its two marker comments in a README.

/// The comment before the table.
pub const START: &str = "<!-- validation table: start -->";
/// The comment after it.
pub const END: &str = "<!-- validation table: end -->";

/// `readme` with what stands between the markers replaced by `table`; `None` if the markers are not
/// there once each, in their order.
#[must_use]
pub fn replace(readme: &str, table: &str) -> Option<String> {
    let (before, rest) = readme.split_once(START)?;
    let (_, after) = rest.split_once(END)?;
    if rest.contains(START) || after.contains(END) {
        return None;
    }
    Some(format!(
        "{before}{START}\n\n{}\n\n{END}{after}",
        table.trim()
    ))
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn only_what_stands_between_the_markers_changes() {
        let text = format!("# Title\n{START}\nold\n{END}\ntail\n");
        let new = replace(&text, "| a |").expect("markers");
        assert_eq!(new, format!("# Title\n{START}\n\n| a |\n\n{END}\ntail\n"));
        assert_eq!(replace(&new, "| a |"), Some(new.clone()));
    }

    #[test]
    fn missing_or_doubled_markers_are_refused() {
        assert_eq!(replace("no markers", "t"), None);
        assert_eq!(replace(&format!("{END} {START}"), "t"), None);
        assert_eq!(replace(&format!("{START} {START} {END}"), "t"), None);
    }
}
