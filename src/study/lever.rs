//! What a mill can change: a key of the spec, its value today, and the values it can be set to.
//!
//! A lever's value is told in the unit a person writes. It is rounded to its own steps, to the side on which the
//! bend is better off, and put into the spec's document as text: what is proposed is what has been run.

use crate::spec::{Document, KeyPath, NewValue, SetError};

/// To which side a bend is better off.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Better {
    /// With more of it.
    Up,
    /// With less of it.
    Down,
}

/// One thing that can be changed.
#[derive(Debug, Clone, PartialEq)]
pub struct Lever {
    /// What a person calls it.
    pub name: &'static str,
    /// The keys it changes, each by its share of the lever's value.
    pub keys: Vec<(KeyPath, f64)>,
    /// The unit of its values; empty for a bare number.
    pub unit: &'static str,
    /// Its value today.
    pub today: f64,
    /// To which side the bend is better off.
    pub better: Better,
    /// The least and the most it can be set to.
    pub reach: (f64, f64),
    /// The finest step a mill sets.
    pub step: f64,
    /// The step as a share of the value's decade, where that is coarser: 0.1 for two digits, 0.01 for three.
    pub decade_share: f64,
}

impl Lever {
    /// A lever of one key; `None` where no spec has that key.
    pub fn of_key(
        name: &'static str,
        key: &str,
        unit: &'static str,
        today: f64,
        better: Better,
        reach: (f64, f64),
        step: f64,
    ) -> Option<Self> {
        Some(Self {
            name,
            keys: vec![(KeyPath::parse(key).ok()?, 1.0)],
            unit,
            today,
            better,
            reach,
            step,
            decade_share: 0.1,
        })
    }

    /// The same lever told with three digits rather than two.
    #[must_use]
    pub fn fine(mut self) -> Self {
        self.decade_share = 0.01;
        self
    }

    /// The step at a value: its share of the decade, no finer than the lever's own.
    pub fn step_at(&self, value: f64) -> f64 {
        let decade = 10f64.powf(value.abs().max(1e-12).log10().floor());
        self.step.max(self.decade_share * decade)
    }

    /// The value on the lever's steps, to the side where the bend is better off.
    pub fn rounded(&self, value: f64) -> f64 {
        let step = self.step_at(value);
        let steps = value / step;
        // A value on its step stays there, whatever the last bit says.
        let whole = match self.better {
            Better::Up => (steps - 1e-9).ceil(),
            Better::Down => (steps + 1e-9).floor(),
        };
        whole * step
    }

    /// One step further to the better side.
    pub fn eased(&self, value: f64) -> f64 {
        match self.better {
            Better::Up => value + self.step_at(value),
            Better::Down => value - self.step_at(value),
        }
    }

    /// One step to the worse side.
    pub fn tightened(&self, value: f64) -> f64 {
        match self.better {
            Better::Up => value - self.step_at(value),
            Better::Down => value + self.step_at(value),
        }
    }

    /// The text of a value, without its unit.
    pub fn digits(&self, value: f64) -> String {
        let decimals = (-self.step_at(value).log10().floor()).max(0.0) as usize;
        let text = format!("{value:.decimals$}");
        if text.contains('.') {
            text.trim_end_matches('0').trim_end_matches('.').to_owned()
        } else {
            text
        }
    }

    /// What each key is set to, as a person would write it.
    pub fn settings(&self, value: f64) -> Vec<(String, String)> {
        let text = |share: f64| {
            let digits = self.digits(self.rounded(share * value));
            if self.unit.is_empty() {
                digits
            } else {
                format!("\"{digits} {}\"", self.unit)
            }
        };
        self.keys
            .iter()
            .map(|(key, share)| (key.text.clone(), text(*share)))
            .collect()
    }

    /// Puts a value into a spec: exactly, or (`told`) as the text a person would write.
    ///
    /// # Errors
    /// Where the spec has no such yarn, passage or tool.
    pub fn put(&self, document: &mut Document, value: f64, told: bool) -> Result<(), SetError> {
        for (key, share) in &self.keys {
            let digits = if told {
                self.digits(self.rounded(share * value))
            } else {
                format!("{:e}", share * value)
            };
            let put = if self.unit.is_empty() {
                NewValue::Number(digits)
            } else {
                NewValue::Text(format!("{digits} {}", self.unit))
            };
            document.set(key, &put)?;
        }
        Ok(())
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn values_are_rounded_to_the_better_side() {
        let lever = |better| {
            Lever::of_key(
                "radius",
                "weave.warp.sett",
                "mm",
                1.0,
                better,
                (0.0, 100.0),
                0.01,
            )
            .unwrap()
        };
        let up = lever(Better::Up);
        assert_eq!(up.digits(up.rounded(0.412)), "0.42");
        assert_eq!(up.digits(up.rounded(0.42)), "0.42");
        assert_eq!(up.digits(up.rounded(12.31)), "13");
        assert_eq!(
            up.clone().fine().digits(up.clone().fine().rounded(12.31)),
            "12.4"
        );
        let down = lever(Better::Down);
        assert_eq!(down.digits(down.rounded(0.418)), "0.41");
        assert_eq!(down.digits(down.rounded(3.0)), "3");
        assert_eq!(down.digits(down.rounded(118.7)), "110");
        assert_eq!(
            down.settings(3.0),
            [("weave.warp.sett".to_owned(), "\"3 mm\"".to_owned())]
        );
    }
}
