//! The range a formula holds in, and the error for a value outside it: a formula out of its range gives no number.

use std::fmt;

/// The values of one quantity for which a formula holds.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Range {
    /// What is measured, as the single calculations call it.
    pub quantity: &'static str,
    /// Its unit.
    pub unit: &'static str,
    /// Smallest value.
    pub low: f64,
    /// Largest value; infinite where there is no limit.
    pub high: f64,
    /// The smallest value itself is left out ("more than 0").
    pub above: bool,
}

impl Range {
    /// From `low` to `high`, both included.
    pub const fn new(quantity: &'static str, low: f64, high: f64, unit: &'static str) -> Self {
        Self {
            quantity,
            unit,
            low,
            high,
            above: false,
        }
    }

    /// More than zero.
    pub const fn positive(quantity: &'static str, unit: &'static str) -> Self {
        Self {
            above: true,
            ..Self::new(quantity, 0.0, f64::INFINITY, unit)
        }
    }

    /// Zero or more.
    pub const fn not_negative(quantity: &'static str, unit: &'static str) -> Self {
        Self::new(quantity, 0.0, f64::INFINITY, unit)
    }

    /// The same range under another name.
    pub const fn named(self, quantity: &'static str) -> Self {
        Self { quantity, ..self }
    }

    /// The value, when it is in the range.
    ///
    /// # Errors
    /// [`OutOfRange`] when it is not, or is not a finite number.
    pub fn check(&self, value: f64) -> Result<f64, OutOfRange> {
        let low_enough = if self.above {
            value > self.low
        } else {
            value >= self.low
        };
        if value.is_finite() && low_enough && value <= self.high {
            Ok(value)
        } else {
            Err(OutOfRange {
                value,
                range: *self,
            })
        }
    }
}

/// A number for people: at most four decimals.
fn short(value: f64) -> f64 {
    (value * 1e4).round() / 1e4
}

impl fmt::Display for Range {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        let (low, high) = (short(self.low), short(self.high));
        let unit = match self.unit {
            "" | "pH" => String::new(),
            "%" => "%".to_owned(),
            unit => format!(" {unit}"),
        };
        match (self.above, high.is_finite()) {
            (true, true) => write!(f, "more than {low} to {high}{unit}"),
            (true, false) => write!(f, "more than {low}{unit}"),
            (false, true) => write!(f, "{low} to {high}{unit}"),
            (false, false) => write!(f, "at least {low}{unit}"),
        }
    }
}

/// A value that a formula does not hold for.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct OutOfRange {
    /// The value, in the unit of the range.
    pub value: f64,
    /// The quantity and the values it may have.
    pub range: Range,
}

impl fmt::Display for OutOfRange {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        let quantity = self.range.quantity;
        let value = short(self.value);
        write!(
            f,
            "`{quantity}` is {value}, and this holds for {}",
            self.range
        )
    }
}

impl std::error::Error for OutOfRange {}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn the_ends_belong_to_it_and_nothing_else_does() {
        let range = Range::new("temperature", 0.0, 40.0, "C");
        assert_eq!(range.check(0.0), Ok(0.0));
        assert_eq!(range.check(40.0), Ok(40.0));
        for value in [-0.1, 40.1, f64::NAN, f64::INFINITY] {
            assert!(range.check(value).is_err(), "{value}");
        }
        assert!(Range::positive("volume_l", "L").check(0.0).is_err());
    }

    #[test]
    fn the_error_names_quantity_value_range_and_unit() {
        let error = Range::new("temperature", 0.0, 40.0, "C").check(86.0);
        assert_eq!(
            error.map_err(|e| e.to_string()),
            Err("`temperature` is 86, and this holds for 0 to 40 C".into())
        );
    }
}
