//! Numbers for people: a fixed number of digits, never more than are meant.

/// A number with so many significant digits, without an exponent between 1e-4 and 1e9.
pub fn significant(value: f64, digits: usize) -> String {
    if value == 0.0 || !value.is_finite() {
        return "0".into();
    }
    let exponent = value.abs().log10().floor() as i32;
    if !(-4..9).contains(&exponent) {
        return format!("{value:.*e}", digits.saturating_sub(1));
    }
    let decimals = (digits as i32 - 1 - exponent).max(0) as usize;
    let text = format!("{value:.decimals$}");
    // 9.9996 with four digits rounds up to 10.000: one digit too many.
    let counted = text
        .chars()
        .filter(char::is_ascii_digit)
        .collect::<String>();
    if decimals > 0 && counted.trim_start_matches('0').len() > digits {
        return format!("{value:.*}", decimals - 1);
    }
    text
}

/// As [`significant`], without zeros at the end: for values a person wrote.
pub fn plain(value: f64, digits: usize) -> String {
    let text = significant(value, digits);
    if text.contains('.') && !text.contains('e') {
        text.trim_end_matches('0').trim_end_matches('.').to_owned()
    } else {
        text
    }
}

/// The number rounded to seven significant digits: what a file keeps, so that neither the last bits of the machine's
/// arithmetic nor the rest that an iteration leaves show.
pub fn rounded(value: f64) -> f64 {
    format!("{value:.6e}").parse().unwrap_or(value)
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn digits_are_kept_and_no_more() {
        assert_eq!(significant(0.123_456, 3), "0.123");
        assert_eq!(significant(9.9996, 4), "10.00");
        assert_eq!(significant(2200.0, 4), "2200");
        assert_eq!(significant(12_345.6, 3), "12346");
        assert_eq!(significant(0.000_012_3, 3), "1.23e-5");
        assert_eq!(significant(-0.5, 2), "-0.50");
        assert_eq!(significant(0.0, 3), "0");
        assert_eq!(plain(0.5, 4), "0.5");
        assert_eq!(plain(400.0, 4), "400");
        assert_eq!(rounded(1.0 / 3.0), 0.333_333_3);
    }
}
