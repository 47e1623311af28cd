//! A half-open stretch of time, [start, end).

use crate::time::moment::{Minutes, Moment};

/// The minutes from `start` up to, but not with, `end`; never empty, never backwards.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord, Hash)]
pub struct Span {
    start: Moment,
    end: Moment,
}

impl Span {
    /// The span [start, end), or `None` if it would be empty.
    #[must_use]
    pub fn new(start: Moment, end: Moment) -> Option<Span> {
        (start < end).then_some(Span { start, end })
    }

    /// Its first minute.
    #[must_use]
    pub fn start(self) -> Moment {
        self.start
    }

    /// The first minute after it.
    #[must_use]
    pub fn end(self) -> Moment {
        self.end
    }

    /// How long it is; at least one minute.
    #[must_use]
    pub fn length(self) -> Minutes {
        self.end - self.start
    }

    /// Whether `moment` lies in it.
    #[must_use]
    pub fn contains(self, moment: Moment) -> bool {
        self.start <= moment && moment < self.end
    }

    /// Whether [start, end) of `other` lies wholly in it.
    #[must_use]
    pub fn covers(self, other: Span) -> bool {
        self.start <= other.start && other.end <= self.end
    }

    /// The stretch that both hold.
    #[must_use]
    pub fn overlap(self, other: Span) -> Option<Span> {
        Span::new(self.start.max(other.start), self.end.min(other.end))
    }
}
