//! Sets of time spans: when something is allowed.

use crate::time::moment::{Minutes, Moment};
use crate::time::span::Span;

/// A set of minutes, kept as spans that are sorted, do not touch and do not overlap.
#[derive(Clone, Debug, PartialEq, Eq, Default)]
pub struct WindowSet {
    spans: Vec<Span>,
}

impl WindowSet {
    /// No minute at all.
    #[must_use]
    pub fn never() -> WindowSet {
        WindowSet { spans: Vec::new() }
    }

    /// Every minute that is used here.
    #[must_use]
    pub fn always() -> WindowSet {
        WindowSet::from_spans(Span::new(Moment::EARLIEST, Moment::LATEST))
    }

    /// Every minute before `end`.
    #[must_use]
    pub fn before(end: Moment) -> WindowSet {
        WindowSet::from_spans(Span::new(Moment::EARLIEST, end))
    }

    /// Every minute from `start` on.
    #[must_use]
    pub fn from(start: Moment) -> WindowSet {
        WindowSet::from_spans(Span::new(start, Moment::LATEST))
    }

    /// The union of any spans, in any order.
    #[must_use]
    pub fn from_spans(spans: impl IntoIterator<Item = Span>) -> WindowSet {
        let mut sorted: Vec<Span> = spans.into_iter().collect();
        sorted.sort_unstable();
        let mut merged: Vec<Span> = Vec::with_capacity(sorted.len());
        for span in sorted {
            match merged.last_mut() {
                Some(last) if span.start() <= last.end() => {
                    if let Some(longer) = Span::new(last.start(), last.end().max(span.end())) {
                        *last = longer;
                    }
                }
                _ => merged.push(span),
            }
        }
        WindowSet { spans: merged }
    }

    /// The spans, in order.
    #[must_use]
    pub fn spans(&self) -> &[Span] {
        &self.spans
    }

    /// Whether it holds no minute.
    #[must_use]
    pub fn is_never(&self) -> bool {
        self.spans.is_empty()
    }

    /// Minutes in either set.
    #[must_use]
    pub fn union(&self, other: &WindowSet) -> WindowSet {
        WindowSet::from_spans(self.spans.iter().chain(&other.spans).copied())
    }

    /// Minutes in both sets.
    #[must_use]
    pub fn overlap(&self, other: &WindowSet) -> WindowSet {
        let (mut i, mut j) = (0, 0);
        let mut spans = Vec::new();
        while let (Some(a), Some(b)) = (self.spans.get(i), other.spans.get(j)) {
            spans.extend(a.overlap(*b));
            if a.end() <= b.end() {
                i += 1;
            } else {
                j += 1;
            }
        }
        WindowSet { spans }
    }

    /// Minutes that are not in it.
    #[must_use]
    pub fn gaps(&self) -> WindowSet {
        let mut start = Moment::EARLIEST;
        let mut spans = Vec::with_capacity(self.spans.len() + 1);
        for span in &self.spans {
            spans.extend(Span::new(start, span.start()));
            start = span.end();
        }
        spans.extend(Span::new(start, Moment::LATEST));
        WindowSet { spans }
    }

    /// Every span moved by `by`.
    #[must_use]
    pub fn shifted(&self, by: Minutes) -> WindowSet {
        WindowSet::from_spans(self.spans.iter().filter_map(|s| Span::new(s.start() + by, s.end() + by)))
    }

    /// Whether `moment` is in it.
    #[must_use]
    pub fn contains(&self, moment: Moment) -> bool {
        self.span_at(moment).is_some()
    }

    /// Whether all of `span` is in it.
    #[must_use]
    pub fn covers(&self, span: Span) -> bool {
        self.span_at(span.start()).is_some_and(|holder| holder.covers(span))
    }

    /// The first start at or after `from` from which `length` whole minutes lie in one span; a length of zero needs
    /// only the start itself.
    #[must_use]
    pub fn first_fit(&self, from: Moment, length: Minutes) -> Option<Moment> {
        let first = self.spans.partition_point(|span| span.end() <= from);
        self.spans.get(first..)?.iter().find_map(|span| {
            let start = span.start().max(from);
            (start + length <= span.end() && start < span.end()).then_some(start)
        })
    }

    /// The last start at or before `to` from which `length` whole minutes lie in one span.
    #[must_use]
    pub fn last_fit(&self, to: Moment, length: Minutes) -> Option<Moment> {
        let after = self.spans.partition_point(|span| span.start() <= to);
        self.spans.get(..after)?.iter().rev().find_map(|span| {
            let one = Minutes::new(1);
            let start = (span.end() - length).min(span.end() - one).min(to);
            (start >= span.start()).then_some(start)
        })
    }

    fn span_at(&self, moment: Moment) -> Option<Span> {
        let after = self.spans.partition_point(|span| span.start() <= moment);
        let span = self.spans.get(after.checked_sub(1)?)?;
        span.contains(moment).then_some(*span)
    }
}

#[cfg(test)]
mod tests {
    use super::WindowSet;
    use crate::time::moment::{Minutes, Moment};
    use crate::time::span::Span;
    use proptest::prelude::{Strategy, proptest};

    fn at(minute: i64) -> Moment {
        Moment::from_epoch_minutes(minute)
    }

    fn set(spans: &[(i64, i64)]) -> WindowSet {
        WindowSet::from_spans(spans.iter().filter_map(|(a, b)| Span::new(at(*a), at(*b))))
    }

    fn some_spans() -> impl Strategy<Value = Vec<(i64, i64)>> {
        proptest::collection::vec((0_i64..60, 0_i64..60), 0..8)
    }

    #[test]
    fn spans_that_touch_become_one() {
        assert_eq!(set(&[(5, 9), (0, 5)]), set(&[(0, 9)]));
    }

    #[test]
    fn a_fit_starts_in_the_first_window_that_is_long_enough() {
        let windows = set(&[(0, 10), (20, 60)]);
        assert_eq!(windows.first_fit(at(3), Minutes::new(8)), Some(at(20)));
        assert_eq!(windows.last_fit(at(100), Minutes::new(15)), Some(at(45)));
        assert_eq!(windows.last_fit(at(19), Minutes::new(10)), Some(at(0)));
        assert_eq!(windows.first_fit(at(55), Minutes::new(6)), None);
    }

    proptest! {
        #[test]
        fn set_arithmetic_agrees_with_minute_by_minute_membership(a in some_spans(), b in some_spans()) {
            let (x, y) = (set(&a), set(&b));
            for minute in -1..62 {
                let m = at(minute);
                let in_a = a.iter().any(|(s, e)| *s <= minute && minute < *e);
                let in_b = b.iter().any(|(s, e)| *s <= minute && minute < *e);
                assert_eq!(x.contains(m), in_a);
                assert_eq!(x.union(&y).contains(m), in_a || in_b);
                assert_eq!(x.overlap(&y).contains(m), in_a && in_b);
                assert_eq!(x.gaps().contains(m), !in_a);
            }
        }
    }
}
