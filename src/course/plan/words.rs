//! Words with numbers in them, in the units that the site's people see.

use crate::site::Units;

/// Puts values in the place of `{names}`.
pub fn fill(text: &str, values: &[(&str, String)]) -> String {
    values.iter().fold(text.to_owned(), |t, (name, value)| {
        t.replace(&format!("{{{name}}}"), value)
    })
}

/// A number without needless digits: three that count.
pub fn short(value: f64) -> String {
    let digits = match value.abs() {
        v if v >= 100.0 => 0,
        v if v >= 10.0 => 1,
        v if v >= 0.995 => 2,
        v if v >= 0.1 => 2,
        v if v >= 0.01 => 3,
        _ => 4,
    };
    let text = format!("{value:.digits$}");
    if text.contains('.') {
        text.trim_end_matches('0').trim_end_matches('.').to_owned()
    } else {
        text
    }
}

/// Liters or gallons.
pub fn liters(units: Units, value: f64) -> String {
    match units {
        Units::Metric => format!("{} L", short(value)),
        Units::Us => format!("{} gal", short(value / 3.785_411_784)),
    }
}

/// Kilograms or pounds.
pub fn kilograms(units: Units, value: f64) -> String {
    match units {
        Units::Metric => format!("{} kg", short(value)),
        Units::Us => format!("{} lb", short(value / 0.453_592_37)),
    }
}

/// A temperature.
pub fn degrees(units: Units, value: f64) -> String {
    match units {
        Units::Metric => format!("{value:.1} C"),
        Units::Us => format!("{:.1} F", value * 1.8 + 32.0),
    }
}

/// A difference of temperature.
pub fn warmer(units: Units, value: f64) -> String {
    match units {
        Units::Metric => format!("{} C", short(value)),
        Units::Us => format!("{} F", short(value * 1.8)),
    }
}

/// Grams, or ounces beside them.
pub fn grams(units: Units, value: f64) -> String {
    let metric = if value >= 10_000.0 {
        format!("{} kg", short(value / 1000.0))
    } else {
        format!("{} g", short(value))
    };
    match units {
        Units::Metric => metric,
        Units::Us => format!("{metric} ({} oz)", short(value / 28.349_523_125)),
    }
}

/// Grams that a farm can weigh: rounded down, so that no rounding passes a limit.
pub fn weighable(grams: f64) -> f64 {
    let step = match grams {
        g if g >= 1000.0 => 10.0,
        g if g >= 100.0 => 5.0,
        g if g >= 10.0 => 1.0,
        g if g >= 1.0 => 0.1,
        _ => 0.01,
    };
    // A hair more, so that 0.3 stays 0.3.
    ((grams / step) * (1.0 + 1e-12)).floor() * step
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn numbers_are_short_and_amounts_are_rounded_down() {
        assert_eq!(short(12_345.6), "12346");
        assert_eq!(short(0.0), "0");
        assert_eq!(short(6.50), "6.5");
        assert_eq!(weighable(247.9), 245.0);
        assert!(weighable(3.49) <= 3.49);
        assert_eq!(grams(Units::Us, 283.5), "284 g (10 oz)");
        assert_eq!(
            fill("add {x} of {y}", &[("x", "2 g".into()), ("y", "it".into())]),
            "add 2 g of it"
        );
    }
}
