//! Tension of a thread that slides over a guide.
//!
//! ```text
//! T_out = T_in exp(mu theta)          Euler 1769; Eytelwein 1808 (Morton and Hearle, Eq. 25.2)
//! ```
//!
//! mu -> `friction`; theta -> `turn_rad`. Flexible thread, constant friction, no speed.

/// Tension behind a guide, in the unit of `tension_before`.
pub fn tension_after(tension_before: f64, friction: f64, turn_rad: f64) -> f64 {
    tension_before * (friction * turn_rad).exp()
}

#[cfg(test)]
mod tests {
    use super::tension_after;

    /// Independent step-by-step integration (Runge-Kutta) of dT = mu T d theta, two routes (all three in `tests/solutions.rs`).
    #[test]
    fn follows_the_independent_solution() {
        let routes: [(f64, &[f64], &[f64], f64); 2] = [
            (
                0.2,
                &[0.2, 0.3, 0.25],
                &[90.0, 45.0, 180.0],
                0.760_133_628_139_23,
            ),
            (1.0, &[0.15; 4], &[60.0; 4], 1.874_456_087_585_3),
        ];
        for (start, friction, turn_deg, end) in routes {
            let out = friction.iter().zip(turn_deg).fold(start, |t, (mu, deg)| {
                tension_after(t, *mu, deg.to_radians())
            });
            assert!((out / end - 1.0).abs() < 1e-12, "{out} {end}");
        }
    }
}
