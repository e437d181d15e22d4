//! The line of action of V: dragged by the pointer it adds the torque `Vy (x − x_s) − Vx (y − y_s)`.

use fantoccini::actions::{InputSource, MOUSE_BUTTON_LEFT, MouseActions, PointerAction};

use crate::chromium::Chromium;
use crate::{chromium, program, sheet};

/// Presses on the handle, moves by this many pixels, lets go.
fn drag(browser: &Chromium, x: f64, y: f64) {
    browser.run("document.getElementById('stage').scrollIntoView({ block: 'center' });");
    let mouse = MouseActions::new("mouse".to_string())
        .then(PointerAction::MoveToElement {
            element: browser.element("#handle"),
            duration: None,
            x: 0.0,
            y: 0.0,
        })
        .then(PointerAction::Down {
            button: MOUSE_BUTTON_LEFT,
        })
        .then(PointerAction::MoveBy {
            duration: None,
            x,
            y,
        })
        .then(PointerAction::Up {
            button: MOUSE_BUTTON_LEFT,
        });
    browser.point(mouse);
    browser.drawn();
}

/// A number that changes whenever the picture does.
fn picture(browser: &Chromium) -> String {
    browser.text("return document.getElementById('picture').toDataURL();")
}

#[test]
fn dragging_the_line_of_action_twists_the_bar() {
    chromium::with(|browser| {
        let text = program::demo("ramp-channel");
        let folder = tempfile::tempdir().unwrap();
        let page = program::report(folder.path(), &text);
        let centre = program::shear_centre(folder.path());
        sheet::open(browser, &page);
        browser.click("#clear");
        browser.fill("#number-Vy", "-10");
        browser.fill("#number-Vx", "4");
        browser.drawn();
        // Through the shear centre there is none.
        assert_eq!(sheet::shown(browser, "torque"), 0.0);

        for [right, down] in [[70.0, 0.0], [-150.0, 30.0], [10.0, -90.0]] {
            let before = (picture(browser), sheet::extreme(browser, "tau"));
            let from = [sheet::value(browser, "at-x"), sheet::value(browser, "at-y")];
            drag(browser, right, down);
            let at = [sheet::value(browser, "at-x"), sheet::value(browser, "at-y")];
            // The handle goes where the pointer does, y upwards.
            assert!((at[0] - from[0]) * right >= 0.0 && (at[0] != from[0]) == (right != 0.0));
            assert!((at[1] - from[1]) * down <= 0.0 && (at[1] != from[1]) == (down != 0.0));
            // A force to the left of the shear centre that acts downwards turns anticlockwise, T > 0:
            // T = x × V about the shear centre, kN mm to kN m. Six digits of the place, four of the torque.
            let torque = ((at[0] - centre[0]) * -10.0 - (at[1] - centre[1]) * 4.0) * 1e-3;
            let shown = sheet::shown(browser, "torque");
            assert!(
                (shown - torque).abs() < 1e-3 * torque.abs(),
                "{shown} {torque}"
            );
            assert_eq!(sheet::shown(browser, "offset"), shown);
            assert_ne!(picture(browser), before.0, "the picture follows");
            let answer = program::answer(&text, &[("Vx", 4.0), ("Vy", -10.0)], Some(at), "");
            let expected = answer["extremes"]["tau"]["value"].as_f64().unwrap();
            let tau = sheet::extreme(browser, "tau");
            assert_ne!(tau, before.1);
            assert!((tau - expected).abs() < 1e-3 * expected, "{tau} {expected}");
            let expected = answer["torque"].as_f64().unwrap();
            assert!(
                (shown - expected).abs() < 1e-3 * expected.abs(),
                "{shown} {expected}"
            );
        }

        // A torque stated for itself is added to it.
        let offset = sheet::shown(browser, "offset");
        browser.fill("#number-T", "2");
        browser.drawn();
        assert!((sheet::shown(browser, "torque") - offset - 2.0).abs() < 1e-3 * 2.0);
        browser.click("#to-centre");
        browser.drawn();
        assert_eq!(sheet::shown(browser, "torque"), 2.0);
    });
}
