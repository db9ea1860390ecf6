//! Quantities as people write them: a number and a unit in one string, "7 um" or "57 /in".
//!
//! Both unit systems of the trade are read; inside the program everything is in millimetres, newtons,
//! megapascals (N/mm2), tex, radians, degrees Celsius, turns and threads per millimetre. The conversion
//! happens once, here. Every factor is exact by definition (inch 25.4 mm, pound 0.453 592 37 kg, standard
//! gravity 9.806 65 m/s2, denier 1/9 tex; International yard and pound agreement 1959, ISO 1144 for tex).

mod parse;
mod show;
mod unit;

pub use parse::{Quantity, QuantityError, TwistDirection, parse, parse_twist};
pub use show::{plain, rounded, significant};
pub use unit::{Dimension, Unit};
