//! Every file in `bad/` is refused with the message in its snapshot.

use sectile::read::section_from_text;
use sectile_tests::{file_name, section_files};

#[test]
fn each_bad_file_has_its_message() {
    let files = section_files("bad");
    assert!(files.len() >= 40, "only {} bad files", files.len());
    let mut settings = insta::Settings::clone_current();
    settings.set_prepend_module_to_snapshot(false);
    settings.set_snapshot_path("../bad/messages");
    settings.set_omit_expression(true);
    for path in files {
        let name = file_name(&path);
        let text = std::fs::read_to_string(&path).expect("bad files are UTF-8");
        let Err(faults) = section_from_text(name, &text) else {
            panic!("{name} was read without a fault");
        };
        for fault in faults.faults() {
            assert!(
                !fault.message.is_empty() && !fault.remedy.is_empty(),
                "{name}: {fault:?}"
            );
        }
        let stem = name.strip_suffix(".section.toml").unwrap_or(name);
        settings.bind(|| insta::assert_snapshot!(stem, faults.to_string()));
    }
}
