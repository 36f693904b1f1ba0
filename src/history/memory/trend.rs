//! How a series moved within a window, robustly: one bad reading must not make a trend.

/// How a series moved within a window.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Shift {
    /// The level at the start.
    pub early: f64,
    /// Change over the window by robust means.
    pub change: f64,
    /// Change of the last reading against the level before it; equals `change` when there are too few points to doubt it.
    pub jump: f64,
    /// Largest less smallest.
    pub swing: f64,
    /// Seconds between the first and the last point.
    pub span: i64,
    /// How many points there are.
    pub points: usize,
}

/// The median of a slice, which it reorders; `None` when empty.
pub fn median(values: &mut [f64]) -> Option<f64> {
    if values.is_empty() {
        return None;
    }
    let (middle, odd) = (values.len() / 2, values.len() % 2 == 1);
    let (below, mid, _) = values.select_nth_unstable_by(middle, f64::total_cmp);
    let upper = *mid;
    if odd {
        return Some(upper);
    }
    let lower = below.iter().copied().fold(f64::NEG_INFINITY, f64::max);
    Some(f64::midpoint(lower, upper))
}

/// From this many points on a robust slope decides (Theil 1950, Sen 1968).
const ENOUGH: usize = 4;

/// The shift of points in the order of time; `None` with fewer than two.
pub fn shift(points: &[(i64, f64)]) -> Option<Shift> {
    let (first, last) = (points.first()?, points.last()?);
    if points.len() < 2 || last.0 <= first.0 {
        return None;
    }
    let span = last.0 - first.0;
    let low = points.iter().map(|p| p.1).fold(f64::INFINITY, f64::min);
    let high = points.iter().map(|p| p.1).fold(f64::NEG_INFINITY, f64::max);
    let swing = high - low;
    if points.len() < ENOUGH {
        let change = last.1 - first.1;
        return Some(Shift {
            early: first.1,
            change,
            jump: change,
            swing,
            span,
            points: points.len(),
        });
    }
    let mut values: Vec<f64> = points.iter().map(|p| p.1).collect();
    let third = values.len().div_ceil(3);
    let count = values.len();
    let early = median(&mut values[..third])?;
    let late = median(&mut values[count - third..])?;
    let slope = theil_sen(points)?;
    #[allow(clippy::cast_precision_loss)] // windows are far below 2^53 seconds
    let along = slope * span as f64;
    let ends = late - early;
    // A step in mid-window shows in the ends, a ramp in the slope; they must agree on the direction.
    let change = if along.signum() == ends.signum() && along != 0.0 {
        if along.abs() > ends.abs() {
            along
        } else {
            ends
        }
    } else if along == 0.0 {
        ends
    } else {
        0.0
    };
    let mut before: Vec<f64> = points[..points.len() - 1].iter().map(|p| p.1).collect();
    let jump = last.1 - median(&mut before)?;
    Some(Shift {
        early,
        change,
        jump,
        swing,
        span,
        points: points.len(),
    })
}

fn theil_sen(points: &[(i64, f64)]) -> Option<f64> {
    let mut slopes = Vec::with_capacity(points.len() * (points.len() - 1) / 2);
    for (i, a) in points.iter().enumerate() {
        for b in &points[i + 1..] {
            if b.0 > a.0 {
                #[allow(clippy::cast_precision_loss)] // windows are far below 2^53 seconds
                slopes.push((b.1 - a.1) / (b.0 - a.0) as f64);
            }
        }
    }
    median(&mut slopes)
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn one_bad_reading_is_no_trend() {
        let points: Vec<(i64, f64)> = [0.2, 0.2, 3.0, 0.2, 0.2, 0.2]
            .iter()
            .enumerate()
            .map(|(i, v)| (i64::try_from(i).unwrap_or(0) * 100, *v))
            .collect();
        let shift = shift(&points);
        assert!(shift.is_some_and(|s| s.change.abs() < 1e-9 && s.jump.abs() < 1e-9));
    }

    #[test]
    fn a_ramp_keeps_its_size() {
        let points: Vec<(i64, f64)> = (0..10_i32)
            .map(|i| (i64::from(i) * 10, f64::from(i)))
            .collect();
        let shift = shift(&points);
        assert!(shift.is_some_and(|s| (s.change - 9.0).abs() < 1e-9));
    }

    #[test]
    fn medians() {
        assert_eq!(median(&mut []), None);
        assert_eq!(median(&mut [3.0, 1.0, 2.0]), Some(2.0));
        assert_eq!(median(&mut [4.0, 1.0, 2.0, 3.0]), Some(2.5));
    }
}
