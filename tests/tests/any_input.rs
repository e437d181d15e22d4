//! The reader answers or refuses, whatever it is given; it never panics, and a refusal can be shown.

use proptest::prelude::*;
use sectile::read::section_from_text;
use sectile_tests::section_files;

fn good_texts() -> Vec<String> {
    section_files("good")
        .iter()
        .chain(&section_files("../cli/demo"))
        .map(|path| std::fs::read_to_string(path).expect("good files are UTF-8"))
        .collect()
}

/// Bits of section files; in random order they reach further into the reader than random letters.
const BITS: &[&str] = &[
    "[[piece]]\n",
    "[units]\n",
    "[material.a]\n",
    "[material.b]\n",
    "[piece]\n",
    "[[action]]\n",
    "[[combination]]\n",
    "[[probe]]\n",
    "[[cut]]\n",
    "[[seam]]\n",
    "\n",
    " ",
    ", ",
    "=",
    "[",
    "]",
    "{",
    "}",
    "\"",
    "#",
    ".",
    "name",
    "outline",
    "holes",
    "plate",
    "tube",
    "bar",
    "profile",
    "place",
    "at",
    "round",
    "via",
    "circle",
    "d",
    "t",
    "from",
    "to",
    "b",
    "h",
    "tw",
    "tf",
    "r",
    "r2",
    "b2",
    "tf2",
    "slope",
    "form",
    "\"I\"",
    "\"channel\"",
    "\"angle\"",
    "\"tee\"",
    "\"box\"",
    "N",
    "Vy",
    "Mx",
    "B",
    "factors",
    "between",
    "near",
    "fillet",
    "groove",
    "gap",
    "direct",
    "allowable",
    "pitch",
    "[\"piece 1\", \"piece 2\"]",
    "\"full\"",
    "\"both\"",
    "\"20 N/mm\"",
    "contact",
    "\"seams\"",
    "reference",
    "{ \"action 1\" = 1.35 }",
    "\"1.2 kN m2\"",
    "turn",
    "mirror",
    "\"x\"",
    "E",
    "nu",
    "yield",
    "shear",
    "density",
    "material",
    "length",
    "\"mm\"",
    "\"in\"",
    "0",
    "1",
    "-1",
    "80",
    "0.3",
    "1e9",
    "1e-9",
    "1e300",
    "inf",
    "nan",
    "\"3/8 in\"",
    "\"1/0 mm\"",
    "\"12 kN m\"",
    "true",
    "[0, 0]",
    "[80, 0]",
    "[80, 12]",
    "[0, 12]",
    "[40, 6]",
    "{ at = [80, 0], round = 3 }",
    "{ at = [0, 12], via = [40, 20] }",
    "{ circle = { at = [20, 6], d = 5 } }",
    "é",
    "\u{1b}[2J",
];

/// Replaces, removes or puts in pieces of a text at random places.
fn mutated(text: &str, edits: &[(prop::sample::Index, usize, prop::sample::Index)]) -> String {
    let mut chars: Vec<char> = text.chars().collect();
    for (place, length, bit) in edits {
        let at = place.index(chars.len() + 1);
        let end = (at + length).min(chars.len());
        chars.splice(at..end, BITS[bit.index(BITS.len())].chars());
    }
    chars.into_iter().collect()
}

fn answers(text: &str) {
    match section_from_text("any.section.toml", text) {
        Ok(read) => assert!(!read.section.pieces.is_empty()),
        Err(faults) => {
            assert!(
                !faults.faults().is_empty(),
                "refused without a reason: {text:?}"
            );
            assert!(!faults.to_string().contains('\u{1b}'), "{faults}");
        }
    }
}

proptest! {
    #![proptest_config(ProptestConfig { cases: 512, failure_persistence: None, ..ProptestConfig::default() })]

    #[test]
    fn random_bytes(bytes in prop::collection::vec(any::<u8>(), 0..400)) {
        answers(&String::from_utf8_lossy(&bytes));
    }

    #[test]
    fn random_words(words in prop::collection::vec(prop::sample::select(BITS), 0..120)) {
        answers(&words.concat());
    }

    #[test]
    fn mutations_of_good_files(
        which in any::<prop::sample::Index>(),
        edits in prop::collection::vec((any::<prop::sample::Index>(), 0_usize..6, any::<prop::sample::Index>()), 1..6),
    ) {
        let texts = good_texts();
        answers(&mutated(&texts[which.index(texts.len())], &edits));
    }

    #[test]
    fn numbers_of_good_files_replaced(
        which in any::<prop::sample::Index>(),
        place in any::<prop::sample::Index>(),
        number in prop_oneof![
            any::<f64>().prop_map(|x| format!("{x:e}")),
            (-200_i32..200).prop_map(|x| x.to_string()),
            (-9_i32..12).prop_map(|x| format!("1e{x}")),
        ],
    ) {
        let texts = good_texts();
        let text = &texts[which.index(texts.len())];
        // Only the words that are numbers, so that most mutants are valid TOML.
        let words: Vec<&str> = text.split_inclusive([' ', ',', '[', ']', '\n']).collect();
        let is_number = |word: &&str| word.trim_end_matches([' ', ',', '[', ']', '\n']).parse::<f64>().is_ok();
        let numbers: Vec<usize> = (0..words.len()).filter(|i| is_number(&words[*i])).collect();
        let chosen = numbers[place.index(numbers.len())];
        let mutant: String = words
            .iter()
            .enumerate()
            .map(|(i, word)| {
                if i == chosen {
                    let body = word.trim_end_matches([' ', ',', '[', ']', '\n']);
                    word.replacen(body, &number, 1)
                } else {
                    (*word).to_owned()
                }
            })
            .collect();
        answers(&mutant);
    }
}
