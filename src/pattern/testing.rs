//! Shared by the tests of this room: random patterns, and a pattern laid out several times.

use super::Pattern;
use proptest::prelude::*;

/// Any pattern of up to `most` x `most`, before reduction.
pub(super) fn any_pattern(most: usize) -> impl Strategy<Value = Pattern> {
    (1..=most, 1..=most).prop_flat_map(|(ends, picks)| {
        proptest::collection::vec(any::<bool>(), ends * picks)
            .prop_map(move |up| Pattern::from_fn(ends, picks, |e, p| up[p * ends + e]).unwrap())
    })
}

/// The pattern read again from a drawing of several repeats.
pub(super) fn tiled(pattern: &Pattern, across: usize, up: usize) -> Pattern {
    let mut drawn = Vec::new();
    for _ in 0..up {
        drawn.extend(pattern.rows().iter().map(|row| row.repeat(across)));
    }
    Pattern::from_rows(&drawn).unwrap()
}
