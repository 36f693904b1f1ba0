//! Equal slices of time, each kept as a few numbers.

use std::collections::VecDeque;

/// One slice.
#[derive(Debug, Clone, Copy, PartialEq)]
pub(super) struct Bin {
    start: i64,
    first: i64,
    last: i64,
    count: u32,
    sum: f64,
    pub low: f64,
    pub high: f64,
}

impl Bin {
    /// The middle of the times seen in it.
    pub fn time(&self) -> i64 {
        self.first + (self.last - self.first) / 2
    }

    /// When the last value in it was read.
    pub fn last(&self) -> i64 {
        self.last
    }

    /// The mean without the smallest and the largest value, so that one bad reading doesn't move it.
    pub fn middle(&self) -> f64 {
        match self.count {
            0..=2 => self.sum / f64::from(self.count.max(1)),
            n => (self.sum - self.low - self.high) / f64::from(n - 2),
        }
    }
}

/// The newest slices of a series.
#[derive(Debug, Clone)]
pub(super) struct Bins {
    width: i64,
    keep: usize,
    bins: VecDeque<Bin>,
}

impl Bins {
    /// Slices of `width` seconds, of which `keep` are remembered.
    pub fn new(width: i64, keep: usize) -> Self {
        Self {
            width,
            keep,
            bins: VecDeque::new(),
        }
    }

    pub fn push(&mut self, time: i64, value: f64) {
        let start = time.div_euclid(self.width) * self.width;
        if let Some(bin) = self.bins.back_mut()
            && bin.start == start
        {
            bin.last = time;
            bin.count += 1;
            bin.sum += value;
            bin.low = bin.low.min(value);
            bin.high = bin.high.max(value);
            return;
        }
        if self.bins.len() == self.keep {
            self.bins.pop_front();
        }
        self.bins.push_back(Bin {
            start,
            first: time,
            last: time,
            count: 1,
            sum: value,
            low: value,
            high: value,
        });
    }

    /// Whether everything since `from` is still here.
    pub fn covers(&self, from: i64) -> bool {
        self.bins.len() < self.keep || self.bins.front().is_some_and(|b| b.start <= from)
    }

    /// The slices that reach past `from`, oldest first, and the one before them.
    pub fn since(&self, from: i64) -> (Option<Bin>, impl Iterator<Item = &Bin>) {
        let first = self.bins.partition_point(|b| b.last < from);
        let before = first.checked_sub(1).and_then(|i| self.bins.get(i)).copied();
        (before, self.bins.range(first..))
    }
}
