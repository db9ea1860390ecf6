//! JSON: one object for one spec, an array for several.

use serde::Serialize;

/// Pretty JSON with a line end; one object where there is one report, else an array.
///
/// # Errors
/// Only where a value cannot be written as JSON, which none of the reports' can.
pub fn to_json<T: Serialize>(reports: &[T]) -> Result<String, serde_json::Error> {
    let mut text = match reports {
        [one] => serde_json::to_string_pretty(one)?,
        many => serde_json::to_string_pretty(many)?,
    };
    text.push('\n');
    Ok(text)
}
