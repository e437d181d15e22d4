//! Every reference value at the default tolerance.

use sectile_validation::cases;
use sectile_validation::cases::Status;
use sectile_validation::readme::{END, START};
use sectile_validation::solve::{all_rows, settings};
use sectile_validation::table::{markdown, summary};

#[test]
fn every_value_is_met_by_the_rule_of_its_status() {
    let cases = cases::all().expect("case files");
    let rows = all_rows(&cases, &settings(1e-4)).expect("every case is solved");
    let bad: Vec<String> = rows
        .iter()
        .filter(|r| !r.as_expected())
        .map(|r| r.line())
        .collect();
    assert!(bad.is_empty(), "\n{}", bad.join("\n"));

    // What must not shrink unnoticed.
    let count = |s: Status| rows.iter().filter(|r| r.claim.status == s).count();
    assert!(cases.len() >= 95, "{} cases", cases.len());
    assert!(count(Status::Exact) >= 300);
    assert!(count(Status::Numeric) >= 300);
    assert!(count(Status::Published) >= 180);
    assert!(count(Status::Memory) >= 25);
    let known = rows.iter().filter(|r| r.claim.known_failure.is_some());
    assert_eq!(
        known.count(),
        3,
        "three remembered sector figures are wrong"
    );

    let shown = rows.iter().filter(|r| r.show).count();
    let table = markdown(&rows, |r| r.show);
    let lines = table.lines().filter(|l| l.starts_with('|'));
    assert_eq!(lines.count(), shown + 2);

    // The README shows this table. Not compared are our own figures' last digits, which may differ from one
    // kind of processor to another.
    let readme = include_str!("../../README.md");
    let (_, rest) = readme.split_once(START).expect("the table's start");
    let (printed, _) = rest.split_once(END).expect("the table's end");
    let stated = |text: &str| -> Vec<String> {
        text.lines()
            .filter(|line| !line.is_empty())
            .map(|line| line.split('|').take(5).collect::<Vec<_>>().join("|"))
            .collect()
    };
    let fresh = format!("{}\n{table}", summary(&rows, 1e-4));
    assert_eq!(
        stated(printed),
        stated(&fresh),
        "the README is out of date: run the validation with --readme README.md"
    );
}
