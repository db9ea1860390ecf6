//! Pull and rigidity of a yarn in units of T + B/reach²: both limits, a taut thread and an elastica without pull, are finite.

/// Pull and rigidity of a yarn in units of their own sum.
#[derive(Debug, Clone, Copy, PartialEq)]
pub(super) struct Stiffness {
    /// Pull, 0 to 1.
    pub pull: f64,
    /// Rigidity, mm2: 0 to reach².
    pub rigidity: f64,
    /// Square root of the rigidity, mm.
    pub root: f64,
    /// Pull over rigidity, 1/mm2; infinite for a taut thread.
    pub ratio: f64,
    /// sqrt(l) times the length from which both ends of a piece no longer feel each other: e^-long is a thousandth of
    /// the accuracy asked for.
    pub long: f64,
}

impl Stiffness {
    pub(super) fn new(ratio: f64, reach: f64, accuracy: f64) -> Self {
        let square = reach * reach;
        let (pull, rigidity) = if ratio.is_infinite() {
            (1.0, 0.0)
        } else {
            let whole = ratio * square + 1.0;
            (ratio * square / whole, square / whole)
        };
        Self {
            pull,
            rigidity,
            root: rigidity.sqrt(),
            ratio,
            long: (1e3 / accuracy).ln().clamp(8.0, 30.0),
        }
    }

    /// Whether an arc of this curvature, 1/mm, presses on what it lies on.
    pub(super) fn presses(&self, curvature: f64) -> bool {
        self.pull >= 0.5 * self.rigidity * curvature * curvature
    }
}
