//! Graded, three-valued truth: an interval of degrees between 0 (surely not) and 1 (surely). Unknown is the whole of it.

/// An interval of degrees.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Degree {
    /// Surely at least.
    pub lo: f64,
    /// Surely at most.
    pub hi: f64,
}

impl Degree {
    /// Nothing is known.
    pub const UNKNOWN: Self = Self { lo: 0.0, hi: 1.0 };
    /// Surely so.
    pub const TRUE: Self = Self { lo: 1.0, hi: 1.0 };
    /// Surely not so.
    pub const FALSE: Self = Self { lo: 0.0, hi: 0.0 };

    /// Known to this degree (kept within 0 and 1).
    pub fn known(degree: f64) -> Self {
        let d = degree.clamp(0.0, 1.0);
        Self { lo: d, hi: d }
    }

    /// From yes or no.
    pub fn of(truth: bool) -> Self {
        if truth { Self::TRUE } else { Self::FALSE }
    }

    /// Between two degrees, in either order.
    pub fn between(a: f64, b: f64) -> Self {
        Self {
            lo: a.min(b).clamp(0.0, 1.0),
            hi: a.max(b).clamp(0.0, 1.0),
        }
    }

    /// Minimum on both ends (Kleene 1952): one sure 0 settles it however much is unknown.
    #[must_use]
    pub fn and(self, other: Self) -> Self {
        Self {
            lo: self.lo.min(other.lo),
            hi: self.hi.min(other.hi),
        }
    }

    /// Maximum on both ends.
    #[must_use]
    pub fn or(self, other: Self) -> Self {
        Self {
            lo: self.lo.max(other.lo),
            hi: self.hi.max(other.hi),
        }
    }

    /// Complement.
    #[must_use]
    pub fn complement(self) -> Self {
        Self {
            lo: 1.0 - self.hi,
            hi: 1.0 - self.lo,
        }
    }

    /// The same, trusted less: 0 leaves it, 1 makes it unknown.
    #[must_use]
    pub fn faded(self, share: f64) -> Self {
        Self {
            lo: self.lo * (1.0 - share),
            hi: 1.0 - (1.0 - self.hi) * (1.0 - share),
        }
    }

    /// Whether nothing at all is known.
    pub fn is_unknown(self) -> bool {
        self.lo <= 0.0 && self.hi >= 1.0
    }

    /// The n-th largest of several, on both ends; `n` from 1. Fewer than `n` degrees are surely not enough.
    pub fn nth_largest(n: usize, degrees: impl Iterator<Item = Self> + Clone) -> Self {
        let nth = |ends: &mut Vec<f64>| {
            ends.sort_by(|a, b| b.total_cmp(a));
            n.checked_sub(1)
                .and_then(|i| ends.get(i))
                .copied()
                .unwrap_or(0.0)
        };
        Self {
            lo: nth(&mut degrees.clone().map(|d| d.lo).collect()),
            hi: nth(&mut degrees.map(|d| d.hi).collect()),
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_sure_no_settles_a_conjunction() {
        assert_eq!(Degree::UNKNOWN.and(Degree::FALSE), Degree::FALSE);
        assert_eq!(Degree::UNKNOWN.or(Degree::TRUE), Degree::TRUE);
        assert_eq!(Degree::UNKNOWN.complement(), Degree::UNKNOWN);
    }

    #[test]
    fn fading_ends_in_the_unknown() {
        assert_eq!(Degree::TRUE.faded(1.0), Degree::UNKNOWN);
        assert_eq!(Degree::FALSE.faded(0.5), Degree { lo: 0.0, hi: 0.5 });
    }

    #[test]
    fn nth_largest_counts() {
        let three = [Degree::TRUE, Degree::UNKNOWN, Degree::FALSE];
        assert_eq!(Degree::nth_largest(1, three.into_iter()), Degree::TRUE);
        assert_eq!(Degree::nth_largest(2, three.into_iter()), Degree::UNKNOWN);
        assert_eq!(Degree::nth_largest(4, three.into_iter()), Degree::FALSE);
    }
}
