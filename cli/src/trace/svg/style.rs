//! What of an element's style decides whether it is seen.

use roxmltree::Node;

/// Whether an element is filled and has a line around it; inherited.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub struct Style {
    /// It is filled.
    pub fill: bool,
    /// Its line is drawn.
    pub stroke: bool,
    /// `visibility` is not hidden.
    pub visible: bool,
}

impl Style {
    /// The style at the root.
    pub const START: Self = Self {
        fill: true,
        stroke: false,
        visible: true,
    };

    /// The style of an element within one of this style; `None`: it and what it holds are not shown.
    #[must_use]
    pub fn of(self, node: Node<'_, '_>) -> Option<Self> {
        let value = |name: &str| {
            let own = node.attribute("style").and_then(|style| {
                style.split(';').rev().find_map(|entry| {
                    let (key, value) = entry.split_once(':')?;
                    (key.trim() == name).then(|| value.trim())
                })
            });
            own.or_else(|| node.attribute(name).map(str::trim))
        };
        if value("display") == Some("none") {
            return None;
        }
        if value("opacity").and_then(|v| v.parse::<f64>().ok()) == Some(0.0) {
            return None;
        }
        let shown = |name: &str, before: bool| match value(name) {
            Some("none" | "transparent") => false,
            Some("inherit") | None => before,
            Some(_) => true,
        };
        Some(Self {
            fill: shown("fill", self.fill),
            stroke: shown("stroke", self.stroke),
            visible: match value("visibility") {
                Some("hidden" | "collapse") => false,
                Some("inherit") | None => self.visible,
                Some(_) => true,
            },
        })
    }
}
