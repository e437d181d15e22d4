//! Faults of the TOML itself, told like all others.

use std::ops::Range;

use toml_span::{Error, ErrorKind};

use super::fault::Fault;

/// The fault that stopped the parser. It stops at the first; the rest shows once that is mended.
pub(super) fn fault(text: &str, error: &Error) -> Fault {
    let range: Range<usize> = error.span.into();
    let at = |remark: &str, message: &str, remedy: &str| {
        Fault::at(range.clone(), remark, message, remedy)
    };
    let first_of = |first: &toml_span::Span| -> Range<usize> { (*first).into() };
    match &error.kind {
        ErrorKind::UnexpectedEof => at(
            "the file ends here",
            "the file ends in the middle of an entry",
            "complete the last entry; most often a value or a closing `]` or `}` is missing",
        ),
        ErrorKind::ExceededDepthLimit => at(
            "one level too many",
            "lists or tables are nested too deeply",
            "nothing in a section file needs more than a few levels; look for stray `[` or `{`",
        ),
        ErrorKind::InvalidCharInString('\n') | ErrorKind::UnterminatedString => at(
            "the quotation mark is still open here",
            "a text in quotation marks is not closed",
            "add the closing `\"`",
        ),
        ErrorKind::InvalidCharInString(c) => at(
            "",
            &format!(
                "a text holds the character {}, which TOML does not allow",
                shown(*c)
            ),
            "remove it, or write it as an escape such as `\\t`",
        ),
        ErrorKind::InvalidEscape(_)
        | ErrorKind::InvalidHexEscape(_)
        | ErrorKind::InvalidEscapeValue(_) => at(
            "after a backslash",
            "a backslash in a text starts an escape that does not exist",
            "write `\\\\` for a backslash, or use single quotation marks, in which it stands for itself",
        ),
        ErrorKind::Unexpected(c @ ('“' | '”' | '„' | '‘' | '’' | '«' | '»')) => at(
            "",
            &format!("the quotation mark {} cannot stand here", shown(*c)),
            "write texts between straight quotation marks: \"…\"",
        ),
        ErrorKind::Unexpected(c) => at(
            "",
            &format!("the character {} cannot stand here", shown(*c)),
            "an entry reads `key = value`; a table starts with `[name]` or `[[name]]`; a remark starts with `#`",
        ),
        ErrorKind::InvalidNumber if is_too_large(text, &range) => at(
            "",
            "this number is larger than a computer's number can be",
            "choose a unit that suits the section's size; see [units]",
        ),
        ErrorKind::InvalidNumber => at(
            "",
            "this is not a number",
            "write it as 12, 12.5 or 1.25e1, without leading zeros; texts and quantities with a unit \
             go in quotation marks: \"12.5 mm\"",
        ),
        ErrorKind::UnquotedString => at(
            "",
            "a value must be a number, a text in quotation marks, a list or a table",
            "put texts and quantities with a unit in quotation marks: \"3/8 in\"",
        ),
        ErrorKind::Wanted { expected, found } => at(
            "",
            &format!(
                "{} was expected here, not {}",
                wanted(expected),
                in_words(found)
            ),
            match (*expected, *found) {
                ("a right bracket" | "a comma", "an identifier") => {
                    "put texts and quantities with a unit in quotation marks, \"10 mm\", and commas \
                     between entries"
                }
                ("a right bracket", _) => {
                    "separate the entries of a list by commas and close it with `]`"
                }
                ("a comma", _) => {
                    "separate the entries of an inline table by commas and close it with `}`"
                }
                ("an equals", _) => "an entry reads `key = value`",
                ("a value", _) => "give a number, a text in quotation marks, a list or a table",
                ("newline", "a comma") => {
                    "write a decimal point, not a comma; a list goes in brackets: [1, 2]"
                }
                ("newline", _) => {
                    "start every entry on its own line; put texts and quantities with a unit in quotation marks"
                }
                _ => "compare with the file that `sectile new` writes",
            },
        ),
        ErrorKind::DuplicateTable { name, first } => at(
            "again here",
            &format!("the table `{}` is given twice", printable(name)),
            "merge the two tables, or rename one",
        )
        .and(first_of(first), "first here"),
        ErrorKind::DuplicateKey { key, first } => at(
            "again here",
            &format!("the key `{}` is given twice", printable(key)),
            "keep one of the two; pieces are headed `[[piece]]`, with two brackets",
        )
        .and(first_of(first), "first here"),
        ErrorKind::RedefineAsArray => at(
            "as a list of tables here",
            "one name is used both for a table and for a list of tables",
            "head every piece with `[[piece]]`, two brackets on either side",
        ),
        ErrorKind::MultilineStringKey => at(
            "",
            "a key cannot run over several lines",
            "write the key on one line",
        ),
        ErrorKind::DottedKeyInvalidType { first } => at(
            "extended here",
            "a key with a dot extends something that is not a table",
            "rename one of the two keys",
        )
        .and(first_of(first), "has a value already"),
        // What is left belongs to the deserialisers of the parser's crate, which are not used here.
        _ => at(
            "",
            "this is not valid TOML",
            "compare with the file that `sectile new` writes",
        ),
    }
}

/// Whether the text reads as a number beyond the range of floating point.
fn is_too_large(text: &str, range: &Range<usize>) -> bool {
    text.get(range.clone())
        .and_then(|number| number.parse::<f64>().ok())
        .is_some_and(f64::is_infinite)
}

fn shown(c: char) -> String {
    if super::excerpt::hidden(c) || c.is_whitespace() {
        format!("U+{:04X}", c as u32)
    } else {
        format!("`{c}`")
    }
}

/// Names come from the file; a terminal must not obey what they hold.
pub(super) fn printable(name: &str) -> String {
    let mut out: String = name
        .chars()
        .take(40)
        .map(|c| if super::excerpt::hidden(c) { '·' } else { c })
        .collect();
    if name.chars().nth(40).is_some() {
        out.push('…');
    }
    out
}

/// What stands where the parser wanted `token`; after an entry a comma would do as well.
fn wanted(token: &str) -> String {
    match token {
        "a comma" => "a comma or `}`".to_owned(),
        "a right bracket" => "a comma or `]`".to_owned(),
        other => in_words(other),
    }
}

fn in_words(token: &str) -> String {
    match token {
        "an equals" => "`=`".to_owned(),
        "a period" => "`.`".to_owned(),
        "a colon" => "`:`".to_owned(),
        "a plus" => "`+`".to_owned(),
        "a left brace" => "`{`".to_owned(),
        "a right brace" => "`}`".to_owned(),
        "a left bracket" => "`[`".to_owned(),
        "a right bracket" => "`]`".to_owned(),
        "a string" | "a multiline string" => "a text".to_owned(),
        "a newline" | "newline" => "the end of the line".to_owned(),
        "a comment" => "a remark".to_owned(),
        "whitespace" => "a blank".to_owned(),
        "eof" => "the end of the file".to_owned(),
        "a table key" => "a key".to_owned(),
        "an identifier" => "a word".to_owned(),
        other => other.to_owned(),
    }
}
