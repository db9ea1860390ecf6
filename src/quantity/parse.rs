//! From "12.5 um" to a number in the internal unit, or a message that says what would do.

use super::unit::{Dimension, UNITS, Unit};
use thiserror::Error;

/// A value in the internal unit of its dimension.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Quantity {
    /// What was measured.
    pub dimension: Dimension,
    /// The value in the internal unit of [`Dimension`]; finite.
    pub value: f64,
}

/// The slope of the fibres in a twisted yarn held upright (ISO 2).
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum TwistDirection {
    /// As the middle stroke of S.
    S,
    /// As the middle stroke of Z.
    Z,
}

/// Why a text is no quantity of the wanted kind.
#[derive(Debug, Clone, PartialEq, Error)]
pub enum QuantityError {
    /// No number at its start.
    #[error("`{found}` does not start with a number")]
    NoNumber {
        /// What stood there.
        found: String,
    },
    /// A decimal comma.
    #[error("`{found}` has a comma; write the number with a point")]
    Comma {
        /// What stood there.
        found: String,
    },
    /// A number that is infinite or not a number.
    #[error("`{found}` is not a finite number")]
    NotFinite {
        /// What stood there.
        found: String,
    },
    /// A number alone.
    #[error("`{found}` has no unit")]
    NoUnit {
        /// What stood there.
        found: String,
    },
    /// A unit nobody knows.
    #[error("unknown unit `{unit}`")]
    UnknownUnit {
        /// The unit as written.
        unit: String,
        /// A unit that differs in case or by a letter.
        nearest: Option<&'static str>,
    },
    /// A unit of something else.
    #[error("`{unit}` is the unit of {is}")]
    WrongDimension {
        /// The unit as written.
        unit: String,
        /// What it measures.
        is: &'static str,
    },
    /// A twist without S or Z.
    #[error("`{found}` has no direction of twist")]
    NoDirection {
        /// What stood there.
        found: String,
    },
}

/// Splits "12.5um" into number and unit text; the unit text has its blanks folded.
fn split(text: &str) -> Result<(f64, String), QuantityError> {
    let text = text.trim();
    let found = || text.to_owned();
    let lower = text.to_ascii_lowercase();
    if ["inf", "nan", "+inf", "-inf", "infinity"]
        .iter()
        .any(|word| {
            lower
                .strip_prefix(word)
                .is_some_and(|rest| rest.is_empty() || rest.starts_with(char::is_whitespace))
        })
    {
        return Err(QuantityError::NotFinite { found: found() });
    }
    let bytes = text.as_bytes();
    let digits = |from: usize| {
        from + bytes[from..]
            .iter()
            .take_while(|byte| byte.is_ascii_digit() || **byte == b'_')
            .count()
    };
    let mut end = usize::from(matches!(bytes.first(), Some(b'+' | b'-')));
    let number_start = end;
    end = digits(end);
    if bytes.get(end) == Some(&b',') {
        return Err(QuantityError::Comma { found: found() });
    }
    if bytes.get(end) == Some(&b'.') {
        end = digits(end + 1);
    }
    if !bytes[number_start..end].iter().any(u8::is_ascii_digit) {
        return Err(QuantityError::NoNumber { found: found() });
    }
    // An exponent only where digits follow it: "5 e" is a number and an unknown unit.
    if matches!(bytes.get(end), Some(b'e' | b'E')) {
        let sign = end + 1 + usize::from(matches!(bytes.get(end + 1), Some(b'+' | b'-')));
        if bytes.get(sign).is_some_and(u8::is_ascii_digit) {
            end = digits(sign);
        }
    }
    let value: f64 = text[..end]
        .replace('_', "")
        .parse()
        .map_err(|_| QuantityError::NoNumber { found: found() })?;
    if !value.is_finite() {
        return Err(QuantityError::NotFinite { found: found() });
    }
    let unit = text[end..].split_whitespace().collect::<Vec<_>>().join(" ");
    Ok((value, unit))
}

/// A unit that differs only in case, or by one letter.
fn nearest(text: &str, wanted: &[Dimension]) -> Option<&'static str> {
    UNITS
        .iter()
        .filter(|unit| wanted.contains(&unit.dimension))
        .find(|unit| unit.symbol.eq_ignore_ascii_case(text))
        .or_else(|| {
            UNITS
                .iter()
                .filter(|unit| wanted.contains(&unit.dimension))
                .filter(|_| text.len() > 2)
                .find(|unit| strsim::damerau_levenshtein(unit.symbol, text) == 1)
        })
        .map(|unit| unit.symbol)
}

fn find(text: &str, wanted: &[Dimension]) -> Result<&'static Unit, QuantityError> {
    let written = |unit: &&Unit| unit.is_written(text);
    if let Some(unit) = UNITS
        .iter()
        .filter(|unit| wanted.contains(&unit.dimension))
        .find(written)
    {
        return Ok(unit);
    }
    match UNITS.iter().find(written) {
        Some(other) => Err(QuantityError::WrongDimension {
            unit: text.to_owned(),
            is: other.dimension.word(),
        }),
        None => Err(QuantityError::UnknownUnit {
            unit: text.to_owned(),
            nearest: nearest(text, wanted),
        }),
    }
}

/// Reads a number with a unit of one of the wanted dimensions.
///
/// # Errors
/// Anything that is not a finite number followed by such a unit.
pub fn parse(text: &str, wanted: &[Dimension]) -> Result<Quantity, QuantityError> {
    let (written, symbol) = split(text)?;
    if symbol.is_empty() {
        return Err(QuantityError::NoUnit {
            found: text.trim().to_owned(),
        });
    }
    let unit = find(&symbol, wanted)?;
    let value = (written + unit.shift) * unit.factor;
    if !value.is_finite() {
        return Err(QuantityError::NotFinite {
            found: text.trim().to_owned(),
        });
    }
    Ok(Quantity {
        dimension: unit.dimension,
        value,
    })
}

/// Reads a twist with its direction, "40 /m Z"; turns per mm. A twist of zero needs no direction.
///
/// # Errors
/// As [`parse`], and a twist other than zero without S or Z.
pub fn parse_twist(text: &str) -> Result<(f64, Option<TwistDirection>), QuantityError> {
    let trimmed = text.trim();
    let (rest, direction) = match trimmed.chars().last() {
        Some('Z' | 'z') => (&trimmed[..trimmed.len() - 1], Some(TwistDirection::Z)),
        Some('S' | 's') => (&trimmed[..trimmed.len() - 1], Some(TwistDirection::S)),
        _ => (trimmed, None),
    };
    let twist = parse(rest, &[Dimension::Twist])?;
    if direction.is_none() && twist.value != 0.0 {
        return Err(QuantityError::NoDirection {
            found: trimmed.to_owned(),
        });
    }
    Ok((twist.value, direction))
}

#[cfg(test)]
mod tests {
    use super::*;
    use proptest::prelude::*;

    fn value(text: &str, dimension: Dimension) -> f64 {
        parse(text, &[dimension]).unwrap().value
    }

    /// Worked conversions by the definitions (inch, pound, gravity, denier): hand calculation.
    #[test]
    fn units_of_both_systems_convert_by_their_definitions() {
        let near = |a: f64, b: f64| assert!((a / b - 1.0).abs() < 1e-9, "{a} {b}");
        near(value("7 um", Dimension::Length), 0.007);
        near(value("7µm", Dimension::Length), 0.007);
        near(value("6.8 mil", Dimension::Length), 0.172_72);
        near(value("1800 den", Dimension::LinearDensity), 200.0);
        near(value("57 /in", Dimension::Sett), 2.244_094_488_188_976);
        near(value("57/in", Dimension::Sett), 2.244_094_488_188_976);
        near(value("2.5 cN/tex", Dimension::SpecificForce), 0.025);
        near(value("1 gf/den", Dimension::SpecificForce), 0.088_259_85);
        near(value("12.5 Msi", Dimension::Stress), 86_184.466_161_461_7);
        near(value("665 ksi", Dimension::Stress), 4_585.013_599_789_8);
        near(value("1 lbf", Dimension::Force), 4.448_221_615_260_5);
        near(
            value("45 deg", Dimension::Angle),
            std::f64::consts::FRAC_PI_4,
        );
        near(value("482 degF", Dimension::Temperature), 250.0);
        near(value("1e-3 N mm2", Dimension::Rigidity), 1e-3);
        assert_eq!(parse_twist("40 /m Z").unwrap().0, 0.04);
        assert_eq!(
            parse_twist("0.7 tpi S").unwrap().1,
            Some(TwistDirection::S),
            "trade abbreviation"
        );
    }

    #[test]
    fn what_is_wrong_is_said() {
        let message = |text: &str| parse(text, &[Dimension::Length]).unwrap_err().to_string();
        assert_eq!(message("7"), "`7` has no unit");
        assert_eq!(message("7 furlong"), "unknown unit `furlong`");
        assert_eq!(message("7 tex"), "`tex` is the unit of a linear density");
        assert_eq!(message("mm"), "`mm` does not start with a number");
        assert_eq!(
            message("0,5 mm"),
            "`0,5 mm` has a comma; write the number with a point"
        );
        assert_eq!(message("inf mm"), "`inf mm` is not a finite number");
        assert_eq!(message("1e999 mm"), "`1e999 mm` is not a finite number");
        assert_eq!(
            parse("3 Mm", &[Dimension::Length]),
            Err(QuantityError::UnknownUnit {
                unit: "Mm".into(),
                nearest: Some("mm")
            })
        );
        assert!(matches!(
            parse_twist("40 /m"),
            Err(QuantityError::NoDirection { .. })
        ));
    }

    proptest! {
        #[test]
        fn any_text_is_read_or_refused(text in ".{0,40}") {
            let _ = parse(&text, &[Dimension::Length, Dimension::Force]);
            let _ = parse_twist(&text);
        }
    }
}
