//! The known word that a misspelt one most likely means.

/// The word of `known` that needs the fewest edits to become `word`, letter case counting less than a
/// letter; the earlier one when two are equally near. `None` only if nothing is known.
#[must_use]
pub fn nearest<'k>(word: &str, known: &[&'k str]) -> Option<&'k str> {
    // A word of any length may arrive here; its first letters decide.
    let word: Vec<char> = word.chars().take(64).collect();
    known.iter().copied().min_by_key(|candidate| {
        let candidate: Vec<char> = candidate.chars().collect();
        let folded = |letters: &[char]| -> Vec<char> {
            letters.iter().flat_map(|c| c.to_lowercase()).collect()
        };
        (
            distance(&folded(&word), &folded(&candidate)),
            distance(&word, &candidate),
        )
    })
}

/// Edits (a letter put in, left out, replaced, or swapped with the next) between two words: the
/// restricted Damerau–Levenshtein distance.
fn distance(a: &[char], b: &[char]) -> usize {
    let mut before: Vec<usize> = Vec::new();
    let mut last: Vec<usize> = (0..=b.len()).collect();
    for i in 1..=a.len() {
        let mut row = vec![i; b.len() + 1];
        for j in 1..=b.len() {
            let replaced = last[j - 1] + usize::from(a[i - 1] != b[j - 1]);
            row[j] = replaced.min(last[j] + 1).min(row[j - 1] + 1);
            if i > 1 && j > 1 && a[i - 1] == b[j - 2] && a[i - 2] == b[j - 1] {
                row[j] = row[j].min(before[j - 2] + 1);
            }
        }
        before = std::mem::replace(&mut last, row);
    }
    last[b.len()]
}

/// Words in a row for a message: `` `a`, `b` or `c` `` with `last` = "or".
#[must_use]
pub fn listed(words: &[&str], last: &str) -> String {
    let quoted: Vec<String> = words.iter().map(|word| format!("`{word}`")).collect();
    match quoted.split_last() {
        None => "nothing".to_owned(),
        Some((only, [])) => only.clone(),
        Some((end, rest)) => format!("{} {last} {end}", rest.join(", ")),
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn misspellings_find_their_word() {
        let known = ["outline", "holes", "plate", "place", "profile"];
        for (word, meant) in [
            ("outlin", "outline"),
            ("hloes", "holes"),
            ("Plate", "plate"),
            ("PLACE", "place"),
            ("profil", "profile"),
            ("", "holes"),
        ] {
            assert_eq!(nearest(word, &known), Some(meant), "{word}");
        }
        assert_eq!(nearest("e", &["nu", "E"]), Some("E"));
        assert_eq!(nearest("x", &[]), None);
    }
}
