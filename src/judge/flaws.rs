//! How many breaks to expect: strength is a distribution, and flaws are found where the stress is.
//!
//! Flaws are strewn over a filament's surface, or through its volume, so that a length L0 under the stress s holds
//! (s/s_0)^m of them on average (Weibull 1951). Bent under pull the stress is s_a + s_b cos f round the filament, and
//! the breaks to expect per length are
//!
//! ```text
//! on the surface      h = (1/L0) mean over f of (max(0, s_a + s_b cos f)/s_0)^m
//! in the volume       h = (1/L0) mean over the disc of the same, cos f along its diameter
//! s_0                 = s/Gamma(1 + 1/m),    s the mean strength at the gauge length L0
//! ```
//!
//! Both are integrals over f from 0 to where the stress vanishes, with 1/pi or (2/pi) sin² f as weight; by Gauss-Legendre
//! in two to four parts, cut off where less than e^-40 is left. With t = s_b/(s_a + s_b) it is (s_a + s_b)^m times a function of t
//! alone, which a fibre keeps as Chebyshev series: three up to 1/2, where all of the section is pulled, and one beyond. Homogeneous
//! of degree m in the stress: the m-th root of allowed over expected breaks is a reserve on the stress scale.
//!
//! A kinked section (`kinked`) bears its tension elastically about a shifted axis: the same formula with its own s_a, s_b.
//! Left out: flaws that the way itself makes (abrasion), fatigue, moisture. Where flaws are not known to lie in the
//! volume alone they are taken to lie on the surface, which counts more breaks. Accuracy 1e-6 for m from 2 to 60, against independent solutions.

use super::filament::Filament;
use super::kinked::kinked_section;
use crate::fibre::{Fibre, FlawKind, Mechanism};
use crate::quadrature::places;
use crate::yarn::Yarn;
use std::f64::consts::PI;

/// Ranges of t of the Chebyshev series, and their terms.
const BOUNDS: [f64; 5] = [0.0, 0.06, 0.2, 0.5, 1.0];
const TERMS: usize = 14;
/// Parts of the integral: the larger m, the narrower its peak.
fn parts(m: f64) -> usize {
    if m <= 12.0 { 2 } else { 4 }
}

/// The integrand below e^-40 of its largest is left out.
const LEFT: f64 = 40.0;

/// Scatter of a fibre's strength, as the count needs it.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Flaws {
    /// Weibull modulus m.
    pub modulus: f64,
    /// Stress at which the gauge length holds one break on average, MPa.
    pub characteristic_mpa: f64,
    /// Gauge length, mm.
    pub gauge_mm: f64,
    /// Whether they lie in the volume rather than on the surface.
    pub in_volume: bool,
    /// Chebyshev coefficients of the mean over (s_a + s_b)^m, for t in each of the ranges of `BOUNDS`.
    series: [[f64; TERMS]; 4],
}

impl Flaws {
    /// Flaws of this modulus and characteristic stress, MPa, at this gauge length, mm.
    pub fn new(modulus: f64, characteristic_mpa: f64, gauge_mm: f64, in_volume: bool) -> Self {
        let mut series = [[0.0; TERMS]; 4];
        for (range, terms) in series.iter_mut().enumerate() {
            let (from, to) = (BOUNDS[range], BOUNDS[range + 1]);
            let angle = |i: usize| PI * (i as f64 + 0.5) / TERMS as f64;
            let values: [f64; TERMS] = std::array::from_fn(|i| {
                let t = from + 0.5 * (to - from) * (1.0 + angle(i).cos());
                mean_power(1.0 - t, t, modulus, in_volume)
            });
            for (j, term) in terms.iter_mut().enumerate() {
                let sum: f64 = (0..TERMS)
                    .map(|i| values[i] * (j as f64 * angle(i)).cos())
                    .sum();
                *term = sum * if j == 0 { 1.0 } else { 2.0 } / TERMS as f64;
            }
        }
        Self {
            modulus,
            characteristic_mpa,
            gauge_mm,
            in_volume,
            series,
        }
    }

    /// The flaws of a fibre; `None` where its scatter is not known, or where it yields before it breaks.
    pub fn of(fibre: &Fibre) -> Option<Self> {
        let weibull = fibre.weibull.filter(|_| fibre.breaks_are_countable())?;
        let m = weibull.modulus;
        Some(Self::new(
            m,
            fibre.strength_mpa / libm::tgamma(1.0 + 1.0 / m),
            weibull.strength_gauge_mm,
            weibull.flaws == FlawKind::Volume,
        ))
    }

    /// Breaks to expect per mm of one filament under an axial and a bending stress, MPa.
    pub fn breaks_per_mm(&self, axial_mpa: f64, bending_mpa: f64) -> f64 {
        let (a, b) = (
            axial_mpa / self.characteristic_mpa,
            bending_mpa / self.characteristic_mpa,
        );
        let (m, top) = (self.modulus, a + b);
        let mean = if a >= 0.0 && top > 0.0 {
            top.powf(m) * self.shape(b / top)
        } else {
            mean_power(a, b, m, self.in_volume)
        };
        mean / self.gauge_mm
    }

    /// The mean over (s_a + s_b)^m at t = s_b/(s_a + s_b), by its Chebyshev series (Clenshaw 1955).
    fn shape(&self, t: f64) -> f64 {
        let range = BOUNDS[1..4].iter().filter(|bound| t > **bound).count();
        let (from, to) = (BOUNDS[range], BOUNDS[range + 1]);
        let x = 2.0 * (t - from) / (to - from) - 1.0;
        let (mut next, mut last) = (0.0, 0.0);
        for term in self.series[range][1..].iter().rev() {
            (next, last) = (term + 2.0 * x * next - last, next);
        }
        self.series[range][0] + x * next - last
    }

    /// The stresses a filament bears in tension, MPa: its own, or those of its kinked section.
    pub fn borne(yarn: &Yarn, filament: &Filament) -> (f64, f64) {
        let axial = filament.axial_stress_mpa;
        let bending = yarn.bending_stress_mpa(filament.curvature_per_mm);
        match yarn.fibre.mechanism {
            Mechanism::Fibrillar { compression, .. } => {
                let onset = compression.in_bending_mpa();
                let section = kinked_section(bending / onset, (axial / onset).max(-1.0));
                if section.kinked {
                    (section.outer * onset - bending, bending)
                } else {
                    (axial, bending)
                }
            }
            _ => (axial, bending),
        }
    }

    /// A reserve on the stress scale: the m-th root of allowed over expected breaks.
    pub fn reserve(&self, allowed: f64, expected: f64) -> f64 {
        (allowed / expected).powf(1.0 / self.modulus)
    }
}

/// Mean of (max(0, a + b cos f))^m round the circle, or over the disc.
pub(super) fn mean_power(a: f64, b: f64, m: f64, in_volume: bool) -> f64 {
    let top = a + b;
    if top <= 0.0 || !top.is_finite() {
        return if top.is_nan() || top > 0.0 { top } else { 0.0 };
    }
    if b <= 0.0 {
        return top.powf(m);
    }
    let end = (-a / b).clamp(-1.0, 1.0).acos();
    let cut = (1.0 - LEFT * top / (m * b)).max(-1.0).acos();
    let sum: f64 = places(0.0, end.min(cut), parts(m))
        .map(|(f, weight)| {
            let cosine = f.cos();
            let share = ((a + b * cosine) / top).max(0.0).powf(m);
            let at = if in_volume {
                2.0 * (1.0 - cosine * cosine)
            } else {
                1.0
            };
            weight * at * share
        })
        .sum();
    top.powf(m) * sum / PI
}

#[cfg(test)]
mod tests {
    use super::*;
    use proptest::prelude::*;
    use serde_json::Value;

    fn cases(text: &str) -> Vec<Value> {
        serde_json::from_str(text).unwrap()
    }

    fn near(ours: f64, theirs: f64, id: &str) {
        assert!((ours / theirs - 1.0).abs() < 1e-6, "{id}: {ours} {theirs}");
    }

    /// Breaks per gauge length over stresses and moduli (independent solution, mpmath; the second method is 2F1).
    #[test]
    fn breaks_match_the_independent_solutions() {
        let list = cases(include_str!("../../tests/reference/a_breaks.json"));
        assert_eq!(list.len(), 54, "the number of cases never falls");
        for case in &list {
            let of = |key: &str| case[key].as_f64().unwrap();
            let id = case["id"].as_str().unwrap();
            let (a, b, m) = (of("sa_over_s0"), of("sb_over_s0"), of("m"));
            near(mean_power(a, b, m, false), of("hL0_surface"), id);
            near(mean_power(a, b, m, true), of("hL0_volume"), id);
        }
    }

    /// Bending alone has a closed form: b^m Gamma((m + 1)/2)/(2 sqrt(pi) Gamma(m/2 + 1)), times 2/(m + 2) over the disc.
    #[test]
    fn bending_alone_is_closed() {
        for case in cases(include_str!("../../tests/reference/a_closed.json")) {
            let of = |key: &str| case[key].as_f64().unwrap();
            let id = case["id"].as_str().unwrap();
            let m = of("m");
            let surface = of("hL0_surface_bend_only_per_bm");
            near(mean_power(0.0, 1.0, m, false), surface, id);
            near(
                mean_power(0.0, 1.0, m, true),
                of("hL0_volume_bend_only_per_bm"),
                id,
            );
            let closed =
                libm::tgamma(0.5 * (m + 1.0)) / (2.0 * PI.sqrt() * libm::tgamma(0.5 * m + 1.0));
            near(closed, surface, id);
            near(
                libm::tgamma(1.0 + 1.0 / m),
                of("mean_over_characteristic"),
                id,
            );
        }
    }

    /// Filaments of given size and radius, per mm (independent solution).
    #[test]
    fn filaments_match_the_independent_solutions() {
        for case in cases(include_str!("../../tests/reference/a_dimensional.json")) {
            let of = |key: &str| case[key].as_f64().unwrap();
            let id = case["id"].as_str().unwrap();
            let flaws = |in_volume| Flaws::new(of("m"), of("s0_MPa"), of("L0_mm"), in_volume);
            let bending = of("E_MPa") * of("d_mm") / (2.0 * of("bend_radius_mm"));
            let h = |in_volume| flaws(in_volume).breaks_per_mm(of("sa_MPa"), bending);
            near(h(false), of("h_surface_per_mm"), id);
            near(h(true), of("h_volume_per_mm"), id);
        }
    }

    /// With no scatter left (m to infinity) a filament breaks exactly past its strength: s_a + s_b = s_0.
    #[test]
    fn without_scatter_the_strength_decides() {
        let at = |share: f64| mean_power(0.3 * share, 0.7 * share, 2000.0, false);
        assert!(
            at(0.99) < 1e-6 && at(1.01) > 1e6,
            "{} {}",
            at(0.99),
            at(1.01)
        );
    }

    /// Filaments with flaws strewn at random, each flaw with its own place round the filament and strength: the number that
    /// breaks agrees with the count within four of its standard errors. The seed is fixed.
    #[test]
    fn random_flaws_break_as_often_as_expected() {
        let (a, b, m) = (0.25_f64, 0.9_f64, 4.0_f64);
        let mut seed = 0x9e37_79b9_7f4a_7c15_u64;
        let mut uniform = || {
            // xorshift64* (Vigna 2016).
            seed ^= seed >> 12;
            seed ^= seed << 25;
            seed ^= seed >> 27;
            (seed.wrapping_mul(0x2545_f491_4f6c_dd1d) >> 11) as f64 / (1u64 << 53) as f64
        };
        // Flaws weaker than `most` on one gauge length: most^m on average; their strengths go as u^(1/m).
        let most = a + b;
        let lengths = 40_000;
        let mut broken = 0_u32;
        for _ in 0..lengths {
            // The count of flaws is Poisson's: product of uniforms (Knuth).
            let floor = (-most.powf(m)).exp();
            let mut left = uniform();
            while left > floor {
                let strength = most * uniform().powf(1.0 / m);
                let angle = 2.0 * PI * uniform();
                broken += u32::from(a + b * angle.cos() > strength);
                left *= uniform();
            }
        }
        let expected = f64::from(lengths) * mean_power(a, b, m, false);
        let error = (f64::from(broken) - expected) / expected.sqrt();
        assert!(error.abs() < 4.0, "{broken} {expected}");
    }

    proptest! {
        /// The series a fibre keeps is the integral.
        #[test]
        fn the_series_is_the_integral(t in 0.0..=1.0f64, m in 2.0..60.0f64, in_volume: bool) {
            let series = Flaws::new(m, 1.0, 1.0, in_volume).breaks_per_mm(1.0 - t, t);
            let integral = mean_power(1.0 - t, t, m, in_volume);
            prop_assert!((series / integral - 1.0).abs() < 1e-6, "{} {}", series, integral);
        }

        /// More stress never breaks less, and twice the stress breaks 2^m times as often.
        #[test]
        fn breaks_rise_with_stress(
            a in -1.0..2.0f64, b in 0.0..2.0f64, m in 2.0..40.0f64, more in 0.0..1.0f64, in_volume: bool,
        ) {
            let here = mean_power(a, b, m, in_volume);
            prop_assert!(mean_power(a + more, b, m, in_volume) >= here * (1.0 - 1e-6));
            let twice = mean_power(2.0 * a, 2.0 * b, m, in_volume);
            prop_assert!((twice - here * 2f64.powf(m)).abs() <= 1e-9 * twice);
        }
    }
}
