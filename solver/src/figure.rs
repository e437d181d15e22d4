//! A figure: a value with what is known about its error.

/// How far the enclosure of a [`Figure`] may be trusted.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Hash, PartialOrd, Ord)]
pub enum Trust {
    /// Closed form: the enclosure covers rounding only.
    Exact,
    /// The enclosure is guaranteed: by a solution and its dual, or by an integral from below and above.
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

/// Relative allowance for rounding in a closed form: a few hundred units in the last place.
pub const ROUNDING: f64 = 1e-13;

/// Arithmetic on enclosures: the result encloses every result of values in the operands.
impl Figure {
    /// A closed-form value whose rounding is small against `scale`; what is smaller than its own
    /// rounding is zero.
    #[must_use]
    pub fn exact(value: f64, scale: f64) -> Self {
        Self::around(value, ROUNDING * scale.abs(), Trust::Exact).snapped()
    }

    /// The same enclosure with the value set to zero where zero lies in an enclosure too narrow to
    /// tell it from zero: what vanishes by symmetry is given as 0 with its error.
    #[must_use]
    pub fn snapped(self) -> Self {
        if self.contains(0.0) {
            Self { value: 0.0, ..self }
        } else {
            self
        }
    }

    fn with(self, other: Self, value: f64, ends: [f64; 4]) -> Self {
        let grow = |m: f64, d: f64| if d > 0.0 { m.next_up() } else { m.next_down() };
        Self {
            value,
            low: grow(ends.iter().copied().fold(f64::INFINITY, f64::min), -1.0),
            high: grow(ends.iter().copied().fold(f64::NEG_INFINITY, f64::max), 1.0),
            trust: self.trust.max(other.trust),
        }
    }

    /// `self + other`.
    #[must_use]
    pub fn plus(self, other: Self) -> Self {
        let (low, high) = (self.low + other.low, self.high + other.high);
        self.with(other, self.value + other.value, [low, high, low, high])
    }

    /// `self − other`.
    #[must_use]
    pub fn minus(self, other: Self) -> Self {
        self.plus(other.scaled(-1.0))
    }

    /// `self · other`.
    #[must_use]
    pub fn times(self, other: Self) -> Self {
        let ends = [
            self.low * other.low,
            self.low * other.high,
            self.high * other.low,
            self.high * other.high,
        ];
        self.with(other, self.value * other.value, ends)
    }

    /// `self / other`; everything, if zero lies in `other`.
    #[must_use]
    pub fn over(self, other: Self) -> Self {
        if other.contains(0.0) {
            let value = self.value / other.value;
            return self.with(
                other,
                value,
                [f64::NEG_INFINITY, f64::INFINITY, value, value],
            );
        }
        let ends = [
            self.low / other.low,
            self.low / other.high,
            self.high / other.low,
            self.high / other.high,
        ];
        self.with(other, self.value / other.value, ends)
    }

    /// `self²`, never below zero.
    #[must_use]
    pub fn squared(self) -> Self {
        let product = self.times(self);
        let low = if self.contains(0.0) {
            0.0
        } else {
            (self.low * self.low).min(self.high * self.high).next_down()
        };
        Self { low, ..product }
    }

    /// `√self`; what lies below zero counts as zero.
    #[must_use]
    pub fn root(self) -> Self {
        let (low, high) = (self.low.max(0.0).sqrt(), self.high.max(0.0).sqrt());
        self.with(self, self.value.max(0.0).sqrt(), [low, high, low, high])
    }
}
