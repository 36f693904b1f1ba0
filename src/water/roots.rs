//! One root of a rising function, by halving: it can't run away, and it needs no slope.

/// Where a rising function passes zero between `low` and `high`, to the last digits a float holds.
///
/// Where it is above zero everywhere this is `low`, and `high` where it is below; a caller for whom that matters checks
/// the ends.
pub fn of_rising(low: f64, high: f64, f: impl Fn(f64) -> f64) -> f64 {
    let (mut low, mut high) = (low, high);
    for _ in 0..100 {
        let middle = low + (high - low) / 2.0;
        if f(middle) < 0.0 {
            low = middle;
        } else {
            high = middle;
        }
    }
    low + (high - low) / 2.0
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn finds_the_root_and_stays_in_its_bounds() {
        assert!((of_rising(0.0, 2.0, |x| x * x - 2.0) - 2f64.sqrt()).abs() < 1e-15);
        assert_eq!(of_rising(1.0, 2.0, |_| 1.0), 1.0);
        assert_eq!(of_rising(1.0, 2.0, |_| -1.0), 2.0);
    }
}
