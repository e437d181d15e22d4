//! How figures look: print width, and whether fields are drawn in bands or in lines.

use super::{NARROWEST, PRINT_WIDTH};

/// How a field is drawn.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Drawing {
    /// Bands of colour with a scale, arrows along stress vectors.
    Bands,
    /// Lines of equal value on white, the value written on them.
    Lines,
}

/// How figures look.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Style {
    /// Print width, mm.
    pub width_mm: f64,
    /// How fields are drawn.
    pub drawing: Drawing,
}

impl Style {
    /// The same, not narrower than [`NARROWEST`]; [`PRINT_WIDTH`] in place of a width that is no number.
    #[must_use]
    pub fn printable(self) -> Self {
        let width_mm = if self.width_mm.is_finite() {
            self.width_mm.max(NARROWEST)
        } else {
            PRINT_WIDTH
        };
        Self { width_mm, ..self }
    }
}
