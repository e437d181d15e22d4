//! File names from names that users give.

/// Longest slug, characters.
const LONGEST: usize = 40;

/// Slugs of names, in their order: letters and digits of ASCII in lower case, one hyphen for whatever
/// stands between them, at most 40 characters; of names that would share one, the later ones are
/// numbered `-2`, `-3`, …
#[must_use]
pub fn slugs<'a>(names: impl IntoIterator<Item = &'a str>) -> Vec<String> {
    let mut taken: Vec<String> = Vec::new();
    for name in names {
        taken.push(unused(&slug(name), &taken));
    }
    taken
}

/// File names without ending of every cut under every action, `cut-<cut>-<action>`, shape
/// `[cuts][actions]`; where two would be the same, the later one is numbered.
#[must_use]
pub fn cut_files(cuts: &[String], actions: &[String]) -> Vec<Vec<String>> {
    let mut taken: Vec<String> = Vec::new();
    for cut in cuts {
        for action in actions {
            let plain = format!("cut-{cut}-{action}");
            taken.push(unused(&plain, &taken));
        }
    }
    let per = actions.len().max(1);
    taken.chunks(per).map(<[String]>::to_vec).collect()
}

/// The name, numbered if it is taken.
fn unused(plain: &str, taken: &[String]) -> String {
    let is_taken = |name: &String| taken.contains(name);
    let numbered = (2..).map(|n| format!("{plain}-{n}"));
    std::iter::once(plain.to_string())
        .chain(numbered)
        .find(|name| !is_taken(name))
        .unwrap_or_default()
}

fn slug(name: &str) -> String {
    let mut out = String::new();
    for c in name.chars() {
        match folded(c) {
            Some(text) => out.push_str(text),
            None if c.is_ascii_alphanumeric() => out.push(c.to_ascii_lowercase()),
            None if !out.is_empty() && !out.ends_with('-') => out.push('-'),
            None => {}
        }
    }
    out.truncate(LONGEST);
    let out = out.trim_end_matches('-');
    if out.is_empty() {
        "unnamed".into()
    } else {
        out.into()
    }
}

/// Common letters beyond ASCII, and signs that would be lost where they tell names apart.
fn folded(c: char) -> Option<&'static str> {
    Some(match c {
        'ä' | 'Ä' => "ae",
        'ö' | 'Ö' | 'ø' | 'Ø' => "oe",
        'ü' | 'Ü' => "ue",
        'ß' => "ss",
        'å' | 'Å' | 'à' | 'á' | 'â' | 'ã' => "a",
        'é' | 'è' | 'ê' | 'ë' | 'É' => "e",
        'í' | 'ì' | 'î' | 'ï' => "i",
        'ó' | 'ò' | 'ô' | 'õ' => "o",
        'ú' | 'ù' | 'û' => "u",
        'ç' => "c",
        'ñ' => "n",
        '%' => "pct",
        '+' => "plus",
        _ => return None,
    })
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn names_become_safe_and_stay_apart() {
        assert_eq!(
            slugs([
                "wheel at midspan",
                "Wheel at mid-span!",
                "WHEEL AT MIDSPAN",
                "../../etc/passwd",
                "1.35 G + 1.5 Q",
                "Böe, quer",
                "風",
                "地",
                "",
            ]),
            [
                "wheel-at-midspan",
                "wheel-at-mid-span",
                "wheel-at-midspan-2",
                "etc-passwd",
                "1-35-g-plus-1-5-q",
                "boee-quer",
                "unnamed",
                "unnamed-2",
                "unnamed-3",
            ]
        );
        let long = "x".repeat(300);
        let all = slugs([long.as_str(), long.as_str()]);
        assert!(all.iter().all(|s| s.len() <= LONGEST + 2) && all[0] != all[1]);
        // A number that a name brings itself is not given twice.
        assert_eq!(slugs(["a", "a-2", "a"]), ["a", "a-2", "a-3"]);
    }

    #[test]
    fn files_of_cuts_stay_apart() {
        let list = |names: &[&str]| names.iter().map(|n| (*n).to_string()).collect::<Vec<_>>();
        assert_eq!(
            cut_files(&list(&["a", "a-b"]), &list(&["b-c", "c"])),
            [["cut-a-b-c", "cut-a-c"], ["cut-a-b-b-c", "cut-a-b-c-2"]]
        );
        assert!(cut_files(&[], &list(&["a"])).is_empty());
    }

    #[test]
    fn only_plain_characters_are_left() {
        for c in (0..0x3000).filter_map(char::from_u32) {
            for slug in slugs([c.to_string().as_str()]) {
                assert!(
                    slug.bytes()
                        .all(|b| b.is_ascii_lowercase() || b.is_ascii_digit() || b == b'-'),
                    "{c:?} {slug}"
                );
            }
        }
    }
}
