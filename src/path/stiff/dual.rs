//! Numbers that carry their change with N quantities through all that is computed from them (forward differentiation).
//!
//! Exact to rounding, for the few operations the elastica asks for.

#![expect(
    clippy::needless_range_loop,
    reason = "changes are walked side by side: the index is the mathematics"
)]

use std::ops::{Add, Div, Mul, Neg, Sub};

/// A value and its change with N quantities.
#[derive(Debug, Clone, Copy)]
pub(super) struct Dual<const N: usize> {
    pub value: f64,
    pub by: [f64; N],
}

impl<const N: usize> Dual<N> {
    /// A value that does not change.
    pub(super) const fn fixed(value: f64) -> Self {
        Self {
            value,
            by: [0.0; N],
        }
    }

    /// The quantity with this index itself.
    pub(super) fn own(value: f64, index: usize) -> Self {
        let mut by = [0.0; N];
        by[index] = 1.0;
        Self { value, by }
    }

    /// What a function makes of it, from the function's value and slope there.
    #[inline]
    pub(super) fn through(mut self, value: f64, slope: f64) -> Self {
        self.value = value;
        for by in &mut self.by {
            *by *= slope;
        }
        self
    }

    #[inline]
    pub(super) fn sqrt(self) -> Self {
        let root = self.value.sqrt();
        self.through(root, 0.5 / root)
    }

    #[inline]
    pub(super) fn times(self, factor: f64) -> Self {
        self.through(factor * self.value, factor)
    }

    /// Angle of the direction (`x`, self).
    pub(super) fn atan2(self, x: Self) -> Self {
        let square = self.value * self.value + x.value * x.value;
        let mut by = [0.0; N];
        for i in 0..N {
            by[i] = (x.value * self.by[i] - self.value * x.by[i]) / square;
        }
        Self {
            value: self.value.atan2(x.value),
            by,
        }
    }
}

impl<const N: usize> Add for Dual<N> {
    type Output = Self;
    #[inline]
    fn add(mut self, other: Self) -> Self {
        self.value += other.value;
        for i in 0..N {
            self.by[i] += other.by[i];
        }
        self
    }
}

impl<const N: usize> Sub for Dual<N> {
    type Output = Self;
    #[inline]
    fn sub(mut self, other: Self) -> Self {
        self.value -= other.value;
        for i in 0..N {
            self.by[i] -= other.by[i];
        }
        self
    }
}

impl<const N: usize> Mul for Dual<N> {
    type Output = Self;
    #[inline]
    fn mul(mut self, other: Self) -> Self {
        for i in 0..N {
            self.by[i] = self.by[i] * other.value + self.value * other.by[i];
        }
        self.value *= other.value;
        self
    }
}

impl<const N: usize> Div for Dual<N> {
    type Output = Self;
    #[inline]
    fn div(mut self, other: Self) -> Self {
        let inverse = 1.0 / other.value;
        self.value *= inverse;
        for i in 0..N {
            self.by[i] = (self.by[i] - self.value * other.by[i]) * inverse;
        }
        self
    }
}

impl<const N: usize> Neg for Dual<N> {
    type Output = Self;
    #[inline]
    fn neg(self) -> Self {
        self.times(-1.0)
    }
}
