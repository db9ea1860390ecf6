//! Integrals by Gauss-Legendre.
//!
//! Nodes and weights of eight points on 0..1 (Abramowitz and Stegun 25.4.30): exact for polynomials up to the 15th degree.

/// Nodes on 0..1.
pub const NODES: [f64; 8] = [
    0.019_855_071_751_231_884,
    0.101_666_761_293_186_63,
    0.237_233_795_041_835_5,
    0.408_282_678_752_175_1,
    0.591_717_321_247_825,
    0.762_766_204_958_164_5,
    0.898_333_238_706_813_4,
    0.980_144_928_248_768_1,
];

/// Their weights; they add up to 1.
pub const WEIGHTS: [f64; 8] = [
    0.050_614_268_145_188_13,
    0.111_190_517_226_687_24,
    0.156_853_322_938_943_64,
    0.181_341_891_689_181,
    0.181_341_891_689_181,
    0.156_853_322_938_943_64,
    0.111_190_517_226_687_24,
    0.050_614_268_145_188_13,
];

/// Places and weights for the integral from `from` to `to` in `parts` equal parts.
pub fn places(from: f64, to: f64, parts: usize) -> impl Iterator<Item = (f64, f64)> {
    let width = (to - from) / parts as f64;
    (0..parts).flat_map(move |part| {
        let start = from + width * part as f64;
        NODES
            .iter()
            .zip(WEIGHTS)
            .map(move |(node, weight)| (start + width * node, width * weight))
    })
}

#[cfg(test)]
mod tests {
    use super::places;

    #[test]
    fn polynomials_of_the_fifteenth_degree_are_exact() {
        let integral: f64 = places(1.0, 3.0, 1).map(|(x, w)| w * x.powi(15)).sum();
        assert!((integral / ((3f64.powi(16) - 1.0) / 16.0) - 1.0).abs() < 1e-13);
    }
}
