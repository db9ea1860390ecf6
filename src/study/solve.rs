//! Where along a lever a place begins to hold: bracketed, found by the root finder, rounded to the safe side, proven.
//!
//! From today's value the lever is moved in steps of a fifth, to the better side where the place does not hold and to
//! the worse side where it does, until the margin changes sign or the reach ends. In that bracket `root` finds the
//! zero on the whole flow. The value is rounded to the lever's steps on the better side and run again; where rounding
//! several keys at once misses by a hair it is eased by up to ten steps, and tightened as long as a step further holds too.

use super::lever::{Better, Lever};
use super::margin::{Target, margin_of};
use crate::pattern::Weaves;
use crate::root::rising_root;
use crate::spec::Document;

/// What a lever does to a place.
#[derive(Debug, Clone, Copy, PartialEq)]
pub enum Found {
    /// It holds from this value on to the better side, and not one step beyond: proven by running it.
    Holds {
        /// The value, on the lever's steps.
        value: f64,
        /// Smallest reserve over what it must be, there.
        ratio: f64,
    },
    /// It holds as far as the lever reaches.
    Everywhere,
    /// It does not hold anywhere in reach.
    Nowhere,
}

/// Finds where along a lever the target begins to hold.
pub fn solve(document: &Document, weaves: &Weaves, lever: &Lever, target: &Target) -> Found {
    let at = |value: f64, told: bool| {
        let mut changed = document.clone();
        match lever.put(&mut changed, value, told) {
            Ok(()) => margin_of(&changed, weaves, target),
            Err(_) => f64::NEG_INFINITY,
        }
    };
    let (least, most) = lever.reach;
    let today = lever.today.clamp(least, most);
    let holds_today = at(today, false) >= 0.0;
    let up = (lever.better == Better::Up) != holds_today;
    let next = |value: f64| {
        if up {
            (1.2 * value).max(value + lever.step).min(most)
        } else {
            (value / 1.2).min(value - lever.step).max(least)
        }
    };
    let mut last = today;
    let crossed = loop {
        let value = next(last);
        if value == last {
            break None;
        }
        if (at(value, false) >= 0.0) != holds_today {
            break Some(value);
        }
        last = value;
    };
    let Some(other) = crossed else {
        return if holds_today {
            Found::Everywhere
        } else {
            Found::Nowhere
        };
    };
    // Between `last`, which is as today, and `other`, which is not. Jams are cut down to a finite margin.
    let finite = |value: f64| at(value, false).clamp(-20.0, 20.0);
    let (low, high) = if last < other {
        (last, other)
    } else {
        (other, last)
    };
    let rising = lever.better == Better::Up;
    let edge = rising_root(
        |value| {
            if rising {
                finite(value)
            } else {
                -finite(value)
            }
        },
        low,
        high,
        1e-3 * lever.step_at(high),
    );
    let told = |value: f64| {
        let within = value >= least && value <= most;
        Some(at(value, true)).filter(|margin| within && *margin >= 0.0)
    };
    let mut value = lever.rounded(edge);
    for _ in 0..10 {
        let Some(mut margin) = told(value) else {
            value = lever.eased(value);
            continue;
        };
        // Rounded keys may reach further than the exact ones did, near a jam by many steps.
        while let Some(beyond) = told(lever.tightened(value)) {
            (value, margin) = (lever.tightened(value), beyond);
        }
        return Found::Holds {
            value,
            ratio: margin.exp(),
        };
    }
    Found::Nowhere
}
