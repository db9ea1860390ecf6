//! Jacobi's elliptic functions sn, cn, dn and the integral of sn², with their change with argument and parameter.
//!
//! A short argument by power series (Abramowitz and Stegun 16.22), then doubled (16.18, written so that nothing cancels next
//! to m = 1):
//!
//! ```text
//! q = c² + s²d²     s2 = 2 s c d / q     c2 = (c²d² - m1 s²) / q     d2 = (m1 + m c⁴) / q     J2 = 2 J + s² s2
//! ```
//!
//! J is the integral of sn² from 0, so E(u) = u - m J. m is the parameter, 0 to 1, m1 = 1 - m is given beside it: next to
//! m = 1 it cannot be had from m.
//!
//! Accuracy 1e-13 (relative, cn and dn next to m = 1 included) for arguments up to 8, against values by quadrature.

#![expect(
    clippy::needless_range_loop,
    reason = "changes are walked side by side: the index is the mathematics"
)]

use super::dual::Dual;

/// The functions at one argument.
#[derive(Debug, Clone, Copy)]
pub(super) struct Jacobi<const N: usize> {
    pub sn: Dual<N>,
    pub cn: Dual<N>,
    pub dn: Dual<N>,
    /// Integral of sn² from 0.
    pub square: Dual<N>,
}

/// The longest argument of the series: its next term is below 1e-14.
const SHORT: f64 = 0.0625;
/// More doublings belong to no piece of yarn.
const DOUBLINGS: i32 = 12;

impl<const N: usize> Jacobi<N> {
    /// At argument `u`, not below zero, for the parameter `m` with `m1` = 1 - m; `None` for an argument past all use.
    pub(super) fn at(u: Dual<N>, m: Dual<N>, m1: Dual<N>) -> Option<Self> {
        let doublings = (u.value / SHORT).log2().ceil().max(0.0);
        if doublings.is_nan() || doublings > f64::from(DOUBLINGS) {
            return None;
        }
        let doublings = doublings as i32;
        let short = u.value * 0.5_f64.powi(doublings);
        // Only the parameter moves on the way; what the argument changes is known at the end.
        let by_m = |value: f64, slope: f64| Dual::<1> { value, by: [slope] };
        let (p, q) = (by_m(m.value, 1.0), by_m(m1.value, -1.0));
        let (mut s, mut c, mut d, mut j) = series(short, p);
        for _ in 0..doublings {
            let (ss, cc, dd) = (s * s, c * c, d * d);
            let whole = Dual::fixed(1.0) / (cc + ss * dd);
            let double = (s * c * d).times(2.0) * whole;
            j = j.times(2.0) + ss * double;
            c = (cc * dd - q * ss) * whole;
            d = (q + p * cc * cc) * whole;
            s = double;
        }
        // Change with the argument: cn dn, -sn dn, -m sn cn, sn².
        let told = |of: Dual<1>, by_u: f64| {
            let mut by = [0.0; N];
            for i in 0..N {
                by[i] = of.by[0] * m.by[i] + by_u * u.by[i];
            }
            Dual {
                value: of.value,
                by,
            }
        };
        Some(Self {
            sn: told(s, c.value * d.value),
            cn: told(c, -s.value * d.value),
            dn: told(d, -m.value * s.value * c.value),
            square: told(j, s.value * s.value),
        })
    }
}

/// sn, cn, dn and the integral of sn² at a short argument.
fn series(u: f64, m: Dual<1>) -> (Dual<1>, Dual<1>, Dual<1>, Dual<1>) {
    let uu = u * u;
    // Polynomial in m from its coefficients, the highest power first.
    let of = |coefficients: &[f64]| {
        coefficients
            .iter()
            .fold(Dual::fixed(0.0), |sum, c| sum * m + Dual::fixed(*c))
    };
    let t3 = of(&[1.0, 1.0]).times(-uu / 6.0);
    let t5 = of(&[1.0, 14.0, 1.0]).times(uu * uu / 120.0);
    let t7 = of(&[1.0, 135.0, 135.0, 1.0]).times(-uu.powi(3) / 5040.0);
    let t9 = of(&[1.0, 1228.0, 5478.0, 1228.0, 1.0]).times(uu.powi(4) / 362_880.0);
    let s = (Dual::fixed(1.0) + t3 + t5 + t7 + t9).times(u);
    let one = Dual::fixed(1.0);
    let c = (one - s * s).sqrt();
    let d = (one - m * s * s).sqrt();
    let j3 = Dual::fixed(1.0 / 3.0);
    let j5 = of(&[1.0, 1.0]).times(-uu / 15.0);
    let j7 = of(&[2.0, 13.0, 2.0]).times(uu * uu / 315.0);
    let j9 = of(&[1.0, 30.0, 30.0, 1.0]).times(-uu.powi(3) / 2835.0);
    let j = (j3 + j5 + j7 + j9).times(u * uu);
    (s, c, d, j)
}

#[cfg(test)]
mod tests {
    use super::*;

    /// The functions with their change with argument and parameter.
    fn at(u: f64, m: f64) -> Jacobi<2> {
        let (u, m) = (Dual::own(u, 0), Dual::own(m, 1));
        Jacobi::at(u, m, Dual::fixed(1.0) - m).unwrap()
    }

    /// Legendre's integrals by another library (`ellip`): u = F(phi, m) for a given phi, J = (u - E(phi, m))/m.
    #[test]
    fn legendres_integrals_are_inverted() {
        for m in [0.05, 0.3, 0.5, 0.9, 0.999] {
            for phi in [0.01_f64, 0.3, 0.8, 1.2, 1.5] {
                let u = ellip::ellipf(phi, m).unwrap();
                let e = ellip::ellipeinc(phi, m).unwrap();
                let found = at(u, m);
                let (sine, cosine) = phi.sin_cos();
                assert!((found.sn.value - sine).abs() < 1e-13, "{m} {phi}");
                assert!((found.cn.value - cosine).abs() < 1e-13, "{m} {phi}");
                let delta = (1.0 - m * sine * sine).sqrt();
                assert!((found.dn.value - delta).abs() < 1e-13, "{m} {phi}");
                assert!(
                    (found.square.value - (u - e) / m).abs() < 1e-13 / m,
                    "{m} {phi}"
                );
            }
        }
    }

    /// m = 1: tanh and 1/cosh, small ones to their last digits; m = 0: sine and cosine.
    #[test]
    fn both_ends_are_elementary() {
        for u in [1e-3, 0.4, 2.0, 5.0, 8.0_f64] {
            let found = at(u, 1.0);
            assert!((found.sn.value / u.tanh() - 1.0).abs() < 1e-13, "{u}");
            assert!((found.cn.value * u.cosh() - 1.0).abs() < 1e-12, "{u}");
            assert!((found.dn.value * u.cosh() - 1.0).abs() < 1e-12, "{u}");
            assert!((found.square.value - (u - u.tanh())).abs() < 1e-13, "{u}");
            let found = at(u, 0.0);
            assert!((found.sn.value - u.sin()).abs() < 1e-13, "{u}");
            assert!((found.cn.value - u.cos()).abs() < 1e-13, "{u}");
        }
    }

    /// Changes by central differences.
    #[test]
    fn changes_are_differences() {
        let h = 1e-5;
        for (u, m) in [(0.03, 0.4), (1.1, 0.2), (2.7, 0.97), (4.0, 0.6)] {
            let found = at(u, m);
            let slopes = [(at(u + h, m), at(u - h, m)), (at(u, m + h), at(u, m - h))];
            for (i, (high, low)) in slopes.iter().enumerate() {
                for of in [
                    |j: &Jacobi<2>| j.sn,
                    |j: &Jacobi<2>| j.cn,
                    |j: &Jacobi<2>| j.dn,
                    |j: &Jacobi<2>| j.square,
                ] {
                    let slope = (of(high).value - of(low).value) / (2.0 * h);
                    assert!((slope - of(&found).by[i]).abs() < 1e-8, "{u} {m} {i}");
                }
            }
        }
    }
}
