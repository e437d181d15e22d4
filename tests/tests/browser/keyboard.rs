//! Without a mouse and without sight: every control is reached, named and moved by keys.

use fantoccini::key::Key;
use serde_json::{Value, json};

use crate::{chromium, program, sheet};

#[test]
fn every_control_is_reached_by_tab_and_has_a_name() {
    chromium::with(|browser| {
        let folder = tempfile::tempdir().unwrap();
        sheet::open(
            browser,
            &program::report(folder.path(), &program::demo("hoist-runway")),
        );
        let controls: Vec<String> = serde_json::from_value(browser.run(
            "return [...document.querySelectorAll('input, select, button, [tabindex]')].map((e) => e.id);",
        ))
        .unwrap();
        // Seven forces with two controls each, and the others.
        assert!(controls.len() >= 14 + 8, "{controls:?}");
        let mut reached = Vec::new();
        for _ in 0..4 * controls.len() {
            browser.press(&String::from(char::from(Key::Tab)));
            // With the id: whether what marks the focus is to be seen.
            let [id, seen]: [Value; 2] = serde_json::from_value(browser.run(
                "const e = document.activeElement;
                 const style = getComputedStyle(e);
                 const box = e.getBoundingClientRect();
                 return [e.id, style.outlineStyle !== 'none' && parseFloat(style.outlineWidth) >= 2
                   && style.outlineColor !== style.backgroundColor
                   && box.width > 0 && box.top >= 0 && box.bottom <= innerHeight];",
            ))
            .unwrap();
            let id = id.as_str().unwrap().to_string();
            if id.is_empty() {
                continue;
            }
            if reached.contains(&id) {
                break;
            }
            assert_eq!(seen, json!(true), "{id}: the focus is not to be seen");
            reached.push(id);
        }
        let mut names = Vec::new();
        for id in &controls {
            assert!(reached.contains(id), "{id} is not reached");
            let [name, role] = browser.told(&format!("#{id}"));
            assert!(name.len() > 3, "{id} is named {name:?}");
            let expected = match id.split('-').next().unwrap() {
                "number" | "at" | "probe" => "spinbutton",
                "slide" => "slider",
                "action" | "measure" => "combobox",
                "clear" | "to" => "button",
                _ => &role,
            };
            assert_eq!(role, expected, "{id}");
            assert!(!role.is_empty() && role != "generic", "{id}: {role}");
            assert!(!names.contains(&name), "two controls are named {name:?}");
            names.push(name);
        }
        for what in [
            "axial force N",
            "shear force Vx",
            "moment Mx",
            "torque T",
            "bimoment B",
        ] {
            let named = names.iter().filter(|name| name.contains(what)).count();
            assert!(named >= 2, "{what} names {named} controls");
        }
        // The picture, the tables, and the reading that is told as it changes.
        let [name, role] = browser.told("#picture");
        assert!(
            name.contains("Stress picture") && matches!(role.as_str(), "img" | "image"),
            "{role}"
        );
        assert_eq!(browser.told("#extremes-table")[1], "table");
        assert_eq!(
            browser.text(
                "return document.getElementById('factor').parentElement.getAttribute('aria-live');"
            ),
            "polite"
        );
    });
}

#[test]
fn arrow_keys_move_forces_fields_and_the_line_of_action() {
    chromium::with(|browser| {
        let folder = tempfile::tempdir().unwrap();
        sheet::open(
            browser,
            &program::report(folder.path(), &program::demo("ramp-channel")),
        );
        let press = |id: &str, key: Key, times: usize| {
            browser.run(&format!("document.getElementById('{id}').focus();"));
            browser.press(&String::from(char::from(key)).repeat(times));
            browser.drawn();
        };
        browser.click("#clear");
        browser.fill("#number-Vy", "-10");
        browser.drawn();

        // Three steps of a slider are three of its steps.
        let step = browser.number("return Number(document.getElementById('slide-Mx').step);");
        press("slide-Mx", Key::Right, 3);
        assert!((sheet::value(browser, "number-Mx") - 3.0 * step).abs() < 1e-9 * step);
        press("slide-Mx", Key::Left, 3);
        assert_eq!(sheet::value(browser, "number-Mx"), 0.0);

        press("measure", Key::Down, 1);
        let unit = browser.text("return document.getElementById('legend-unit').textContent;");
        assert!(unit.contains("normal stress"), "{unit}");

        // The handle moves by a 200th of the section's larger side; V downwards to the right turns clockwise.
        let centre = sheet::value(browser, "at-x");
        press("handle", Key::Right, 4);
        let moved = sheet::value(browser, "at-x") - centre;
        assert!((moved - 4.0).abs() < 1e-3, "200 mm high: {moved}");
        assert!((sheet::shown(browser, "torque") + 10.0 * 4e-3).abs() < 1e-4);
        press("handle", Key::Home, 1);
        assert_eq!(sheet::shown(browser, "torque"), 0.0);
    });
}
