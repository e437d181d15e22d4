//! Files that are faulty before a word of them is read, and files that are merely unusual.

use std::fs;
use std::io::{Seek, SeekFrom, Write};
use std::path::Path;

use sectile::read::fault::Faults;
use sectile::read::show::Look;
use sectile::read::{section_from_path, section_from_text};

const GOOD: &str = "[[piece]]\nname = \"body\"\noutline = [[0, 0], [80, 0], [80, 12], [0, 12]]\n";

/// The report on a file of these bytes, its folder taken out of the messages.
fn report_of(bytes: &[u8]) -> String {
    let folder = tempfile::tempdir().expect("a folder for the test");
    let path = folder.path().join("odd.section.toml");
    fs::write(&path, bytes).expect("the file is written");
    report(folder.path(), &path)
}

fn report(folder: &Path, path: &Path) -> String {
    let faults: Box<Faults> = section_from_path(path).expect_err("the file is faulty");
    assert!(faults.faults().iter().all(|fault| !fault.remedy.is_empty()));
    let folder = format!("{}{}", folder.display(), std::path::MAIN_SEPARATOR);
    faults.render(Look::Plain, 200).replace(&folder, "")
}

#[test]
fn an_empty_file() {
    for bytes in [&b""[..], b"  \n\t\r\n", b"\xef\xbb\xbf"] {
        let report = report_of(bytes);
        assert!(report.contains("odd.section.toml is empty"), "{report}");
        assert!(report.contains("`sectile new`"), "{report}");
    }
}

#[test]
fn a_missing_file() {
    let folder = tempfile::tempdir().expect("a folder for the test");
    let report = report(folder.path(), &folder.path().join("none.section.toml"));
    assert!(
        report.contains("there is no file none.section.toml"),
        "{report}"
    );
}

#[test]
fn a_folder() {
    let folder = tempfile::tempdir().expect("a folder for the test");
    let path = folder.path().join("sections");
    fs::create_dir(&path).expect("the folder is made");
    let report = report(folder.path(), &path);
    assert!(report.contains("sections is a folder"), "{report}");
}

#[test]
fn a_path_through_a_file() {
    let folder = tempfile::tempdir().expect("a folder for the test");
    let file = folder.path().join("file");
    fs::write(&file, "x").expect("the file is written");
    let report = report(folder.path(), &file.join("section.toml"));
    assert!(report.contains("section.toml"), "{report}");
}

#[test]
fn a_hundred_megabytes_are_refused_unread() {
    let folder = tempfile::tempdir().expect("a folder for the test");
    let path = folder.path().join("huge.section.toml");
    // Sparse: it takes no room on the disk, and to read it would take noticeable time.
    let mut file = fs::File::create(&path).expect("the file is made");
    file.seek(SeekFrom::Start(100 * 1024 * 1024 - 1))
        .expect("sparse files can be made");
    file.write_all(b"\n").expect("the last byte is written");
    drop(file);
    let report = report(folder.path(), &path);
    assert!(
        report.contains("is 100 MB large; section files up to 16 MB are read"),
        "{report}"
    );
}

#[test]
fn bytes_that_are_not_utf8() {
    // A title in an older Windows encoding: 0xE7 is ç there.
    let mut bytes = b"# first line\ntitle = \"Fa".to_vec();
    bytes.extend(b"\xe7ade\"\n");
    bytes.extend(GOOD.as_bytes());
    let report = report_of(&bytes);
    assert!(report.contains("not UTF-8"), "{report}");
    assert!(report.contains("odd.section.toml:2:12"), "{report}");
    assert!(report.contains("byte 0xE7"), "{report}");
}

#[test]
fn utf16_and_binary_files() {
    let utf16: Vec<u8> = "\u{feff}title"
        .encode_utf16()
        .flat_map(u16::to_le_bytes)
        .collect();
    assert!(report_of(&utf16).contains("UTF-16"));
    assert!(report_of(b"\x7fELF\x02\x01\x01\x00\x00\x80\xff").contains("not a text file"));
}

#[test]
fn a_byte_order_mark_and_windows_line_ends_are_accepted() {
    let plain = section_from_text("a.section.toml", GOOD).expect("the plain file is read");
    for text in [
        format!("\u{feff}{GOOD}"),
        GOOD.replace('\n', "\r\n"),
        format!("\u{feff}{}", GOOD.replace('\n', "\r\n")),
    ] {
        let read = section_from_text("a.section.toml", &text).expect("it is read all the same");
        assert_eq!(read.section, plain.section);
        assert_eq!(read.domain, plain.domain);
    }
}

#[test]
fn faults_keep_their_lines_with_windows_line_ends_and_a_byte_order_mark() {
    let text = "\u{feff}title = \"x\"\r\n\r\n[[piece]]\r\nnam = \"body\"\r\nbar = 3\r\n";
    let faults = section_from_text("a.section.toml", text).expect_err("it is faulty");
    let lines: Vec<_> = faults
        .faults()
        .iter()
        .map(|fault| faults.line(fault))
        .collect();
    assert_eq!(lines, [Some(4), Some(5)]);
    let report = faults.to_string();
    assert!(report.contains("a.section.toml:4:1"), "{report}");
    assert!(!report.contains('\r'), "{report:?}");
}

#[test]
fn deep_nesting_is_refused_not_followed() {
    for (open, close) in [("[", "]"), ("{ a = ", " }")] {
        let text = format!("title = {}{}", open.repeat(100_000), close.repeat(100_000));
        let faults = section_from_text("deep.section.toml", &text).expect_err("it is too deep");
        assert!(faults.to_string().contains("nested too deeply"), "{faults}");
    }
    let text = format!("[{}]\n", vec!["a"; 100_000].join("."));
    let faults = section_from_text("deep.section.toml", &text).expect_err("it is too deep");
    assert!(faults.to_string().contains("nested too deeply"), "{faults}");
}

#[test]
fn an_outline_of_a_hundred_thousand_corners_is_read() {
    // A gear-like disc, every corner on one of two circles.
    let count = 100_000;
    let mut text = "[[piece]]\noutline = [\n".to_owned();
    for i in 0..count {
        let angle = std::f64::consts::TAU * f64::from(i) / f64::from(count);
        let radius = if i % 2 == 0 { 500.0 } else { 499.99 };
        text.push_str(&format!(
            "[{}, {}],\n",
            radius * angle.cos(),
            radius * angle.sin()
        ));
    }
    text.push_str("]\n");
    let read = section_from_text("gear.section.toml", &text).expect("it is a valid outline");
    assert_eq!(read.section.pieces[0].outline.outer.sides.len(), 100_000);
}

#[test]
fn a_report_of_very_many_faults_stays_short() {
    let text = format!("[[piece]]\noutline = [{}]\n", "[0, nan], ".repeat(100_000));
    let faults = section_from_text("a.section.toml", &text).expect_err("it is faulty");
    assert_eq!(faults.faults().len(), 100_000);
    let report = faults.to_string();
    assert!(report.len() < 20_000, "{} bytes", report.len());
    assert!(report.contains("99970 more"), "{report}");
}

#[test]
fn a_terminal_gets_lines_and_colours_and_a_pipe_does_not() {
    let faults = section_from_text("a.section.toml", "titel = 1\n").expect_err("it is faulty");
    assert!(faults.render(Look::Plain, 100).is_ascii());
    let drawn = faults.render(Look::Terminal, 100);
    assert!(drawn.contains('\u{1b}') && drawn.contains('╭'), "{drawn}");
}
