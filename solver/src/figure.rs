//! A figure: a value with what is known about its error.

/// How far the enclosure of a [`Figure`] may be trusted.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Hash, PartialOrd, Ord)]
pub enum Trust {
    /// Closed form: the enclosure covers rounding only.
    Exact,
    /// The enclosure is guaranteed by a solution and its dual.
    Bounded,
    /// The enclosure rests on a constant that is estimated, not known.
    Estimated,
}

/// A value with an enclosure `low ≤ value ≤ high`.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Figure {
    /// The best value.
    pub value: f64,
    /// Lower end of the enclosure.
    pub low: f64,
    /// Upper end of the enclosure.
    pub high: f64,
    /// What the enclosure rests on.
    pub trust: Trust,
}

impl Figure {
    /// `value ± half_width`.
    #[must_use]
    pub fn around(value: f64, half_width: f64, trust: Trust) -> Self {
        Self {
            value,
            low: value - half_width,
            high: value + half_width,
            trust,
        }
    }

    /// Half of the enclosure's width.
    #[must_use]
    pub fn half_width(&self) -> f64 {
        0.5 * (self.high - self.low)
    }

    /// Whether `x` lies in the enclosure.
    #[must_use]
    pub fn contains(&self, x: f64) -> bool {
        self.low <= x && x <= self.high
    }

    /// The figure in other units: every number times `factor`.
    #[must_use]
    pub fn scaled(&self, factor: f64) -> Self {
        let (a, b) = (self.low * factor, self.high * factor);
        Self {
            value: self.value * factor,
            low: a.min(b),
            high: a.max(b),
            trust: self.trust,
        }
    }
}
