//! The places of the findings kept so far: which of them a place overlaps, without asking each.

use crate::text::Span;
use std::collections::BTreeMap;

/// Places by block and start, each with its end. Places are short, so that few starts lie between a place and the ends
/// that reach it: a look-up goes back no further than the longest of them.
#[derive(Default)]
pub struct Places {
    ends: BTreeMap<(u32, u32, usize), u32>,
    longest: u32,
}

impl Places {
    pub fn add(&mut self, place: Span, number: usize) {
        self.ends.insert((place.block, place.start, number), place.end);
        self.longest = self.longest.max(place.end - place.start);
    }

    /// The numbers of the places that a place overlaps.
    pub fn over(&self, place: Span) -> impl Iterator<Item = usize> {
        let first = (place.block, place.start.saturating_sub(self.longest), 0);
        let end = (place.block, place.end.max(first.1), 0);
        self.ends.range(first..end).filter(move |(_, end)| place.start < **end).map(|(&(.., number), _)| number)
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn finds_what_comparing_each_would() {
        let spans: Vec<Span> = (0..60).map(|i| Span::new(i % 2, i * 7 % 50, i * 7 % 50 + i * i % 9)).collect();
        let mut places = Places::default();
        for (number, &span) in spans.iter().enumerate() {
            places.add(span, number);
        }
        for &span in &spans {
            let mut found: Vec<usize> = places.over(span).collect();
            found.sort_unstable();
            let each: Vec<usize> = (0..spans.len()).filter(|&i| spans[i].overlaps(span)).collect();
            assert_eq!(found, each, "{span:?}");
        }
    }
}
