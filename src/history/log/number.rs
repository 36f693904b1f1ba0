//! The numbers of a log: plain decimals, `<` in front for "below detection", a decimal comma where commas don't
//! separate cells. Nothing is guessed.

use super::problem::Trouble;
use super::row::Value;
use crate::fault::shown;

/// How a file writes decimals.
#[derive(Debug, Clone, Copy)]
pub(super) struct Decimals {
    /// A comma may stand before decimals: commas don't separate the cells of this file.
    pub comma_allowed: bool,
    /// A decimal comma was seen, so that `1.234` might mean a thousand and more.
    pub comma_seen: bool,
}

/// Reads a cell that is not empty.
pub(super) fn value(text: &str, decimals: &mut Decimals) -> Result<Value, Trouble> {
    if let Some(amount) = plain(text.as_bytes()) {
        if decimals.comma_seen && thousands_like(text) {
            return Err(two_ways(text));
        }
        return Ok(Value {
            amount,
            below: false,
        });
    }
    let (rest, below) = match text.strip_prefix('<') {
        Some(rest) => (rest.trim_start(), true),
        None => (text, false),
    };
    let amount = signed(rest, text, decimals)?;
    if below && amount <= 0.0 {
        return Err(Trouble::new(
            "not-a-number",
            format!("`{}` can't be: nothing is less than none", shown(text)),
            "write the kit's limit of detection behind `<`, such as `<0.05`",
        ));
    }
    Ok(Value { amount, below })
}

/// Digits with at most one point, 15 digits at most: both parts are exact, so their quotient is the nearest number.
fn plain(text: &[u8]) -> Option<f64> {
    const POWERS: [f64; 16] = [
        1e0, 1e1, 1e2, 1e3, 1e4, 1e5, 1e6, 1e7, 1e8, 1e9, 1e10, 1e11, 1e12, 1e13, 1e14, 1e15,
    ];
    if text.is_empty() || text.len() > 16 {
        return None;
    }
    let mut digits: u64 = 0;
    let mut count = 0_usize;
    let mut point = None;
    for byte in text {
        match byte {
            b'0'..=b'9' => {
                digits = digits * 10 + u64::from(byte - b'0');
                count += 1;
            }
            b'.' if point.is_none() => point = Some(count),
            _ => return None,
        }
    }
    if count == 0 || count > 15 {
        return None;
    }
    // At most 15 digits: below 2^53.
    #[allow(clippy::cast_precision_loss)]
    let whole = digits as f64;
    let decimals = point.map_or(0, |p| count - p);
    POWERS.get(decimals).map(|power| whole / power)
}

/// `1.234`: in a file with decimal commas, a thousand or one and a bit.
fn thousands_like(text: &str) -> bool {
    matches!(text.split_once('.'), Some((head, tail)) if (1..=3).contains(&head.len()) && tail.len() == 3)
}

fn two_ways(text: &str) -> Trouble {
    Trouble::new(
        "ambiguous-number",
        format!(
            "`{}` can be read two ways in a file with decimal commas",
            shown(text)
        ),
        "write all decimals of the file with the same sign",
    )
}

/// The general case: sign, exponent, decimal comma. `whole` is the cell as it stands, for the message.
fn signed(text: &str, whole: &str, decimals: &mut Decimals) -> Result<f64, Trouble> {
    let lower = text.trim_start_matches(['+', '-']).to_ascii_lowercase();
    if ["nan", "inf", "infinity"].contains(&lower.as_str()) {
        return Err(Trouble::new(
            "not-finite",
            format!("`{}` is not a measurement", shown(whole)),
            "leave the cell empty when nothing was measured",
        ));
    }
    if text.starts_with('>') {
        return Err(Trouble::new(
            "above-range",
            format!(
                "`{}` is above what the test can show, so the value is not known",
                shown(whole)
            ),
            "dilute the sample and test again, or put the words in `note`",
        ));
    }
    let commas = text.matches(',').count();
    let mut point = std::borrow::Cow::Borrowed(text);
    if commas > 0 {
        let shaped = is_number(&text.replacen(',', ".", 1));
        if !decimals.comma_allowed && shaped {
            return Err(Trouble::new(
                "decimal-comma",
                format!(
                    "`{}` has a decimal comma, but commas separate the cells of this file",
                    shown(whole)
                ),
                "write a decimal point, or separate the cells with `;`",
            ));
        }
        if shaped {
            decimals.comma_seen = true;
            point = text.replacen(',', ".", 1).into();
        }
    } else if decimals.comma_seen && thousands_like(text.trim_start_matches(['+', '-'])) {
        return Err(two_ways(whole));
    }
    let amount = if is_number(&point) {
        point.parse::<f64>().ok()
    } else {
        None
    };
    match amount {
        // Adding zero turns a minus zero into a plain one.
        Some(amount) if amount.is_finite() => Ok(amount + 0.0),
        Some(_) => Err(Trouble::new(
            "not-finite",
            format!("`{}` is too large to be a number", shown(whole)),
            "correct the number",
        )),
        None => Err(Trouble::new(
            "not-a-number",
            format!("`{}` is not a number", shown(whole)),
            "write a number such as 6.9, leave the cell empty, or put words in `note`",
        )),
    }
}

/// `[+-] digits [. digits] [e [+-] digits]`, at least one digit before the exponent.
fn is_number(text: &str) -> bool {
    let digits = |part: &str| !part.is_empty() && part.bytes().all(|b| b.is_ascii_digit());
    let unsigned = text.strip_prefix(['+', '-']).unwrap_or(text);
    let (mantissa, exponent) = match unsigned.split_once(['e', 'E']) {
        Some((m, e)) => (m, Some(e.strip_prefix(['+', '-']).unwrap_or(e))),
        None => (unsigned, None),
    };
    let good = match mantissa.split_once('.') {
        Some(("", after)) => digits(after),
        Some((before, "")) => digits(before),
        Some((before, after)) => digits(before) && digits(after),
        None => digits(mantissa),
    };
    good && exponent.is_none_or(digits)
}

#[cfg(test)]
mod tests {
    use super::*;
    use proptest::prelude::*;

    fn read(text: &str, comma_allowed: bool) -> Result<(f64, bool), &'static str> {
        let mut decimals = Decimals {
            comma_allowed,
            comma_seen: false,
        };
        value(text, &mut decimals)
            .map(|v| (v.amount, v.below))
            .map_err(|t| t.code)
    }

    #[test]
    fn numbers_and_what_is_none() {
        for (text, expected) in [
            ("6.9", Ok((6.9, false))),
            ("0", Ok((0.0, false))),
            (".5", Ok((0.5, false))),
            ("5.", Ok((5.0, false))),
            ("-2.5", Ok((-2.5, false))),
            ("+2.5", Ok((2.5, false))),
            ("1.2e-3", Ok((0.0012, false))),
            ("<0.05", Ok((0.05, true))),
            ("< 0.05", Ok((0.05, true))),
            ("<0", Err("not-a-number")),
            ("<-1", Err("not-a-number")),
            ("nan", Err("not-finite")),
            ("-NaN", Err("not-finite")),
            ("inf", Err("not-finite")),
            ("<inf", Err("not-finite")),
            ("1e999", Err("not-finite")),
            (">4", Err("above-range")),
            ("7,1", Err("decimal-comma")),
            ("1,2,3", Err("not-a-number")),
            ("0x10", Err("not-a-number")),
            ("6.9 mg", Err("not-a-number")),
            ("1.2.3", Err("not-a-number")),
            ("e5", Err("not-a-number")),
            (".", Err("not-a-number")),
            ("1_000", Err("not-a-number")),
            ("٣", Err("not-a-number")),
        ] {
            assert_eq!(read(text, false), expected, "{text}");
        }
        assert!(matches!(read("-0.0", false), Ok((z, _)) if z.is_sign_positive()));
    }

    #[test]
    fn decimal_commas_where_they_are_allowed() {
        assert_eq!(read("7,1", true), Ok((7.1, false)));
        assert_eq!(read("<0,05", true), Ok((0.05, true)));
        assert_eq!(read("1.234,5", true), Err("not-a-number"));
        let mut decimals = Decimals {
            comma_allowed: true,
            comma_seen: false,
        };
        assert!(value("1.234", &mut decimals).is_ok());
        assert!(value("7,1", &mut decimals).is_ok());
        assert!(value("7.1", &mut decimals).is_ok());
        let refused = value("1.234", &mut decimals).map_err(|t| t.code);
        assert_eq!(refused, Err("ambiguous-number"));
    }

    proptest! {
        #[test]
        fn the_short_way_agrees_with_the_library(whole in 0_u64..10_000_000, places in 0_usize..8) {
            let power = 10_u64.pow(u32::try_from(places).unwrap_or(0));
            let text = format!("{}.{:0places$}", whole / power, whole % power);
            prop_assert_eq!(read(&text, false), Ok((text.parse::<f64>().unwrap_or(f64::NAN), false)));
        }

        #[test]
        fn any_text_is_answered(text in "\\PC{0,24}", comma in any::<bool>()) {
            if let Ok((amount, _)) = read(&text, comma) {
                prop_assert!(amount.is_finite());
            }
        }
    }
}
