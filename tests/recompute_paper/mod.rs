//! Results made by hand for the tests of recomputation.
#![allow(dead_code)]

use tallyproof::context::{Context, Stated, Test};
use tallyproof::printed::Printed;
use tallyproof::reading::*;
use tallyproof::recompute::{Checked, recompute};
use tallyproof::result::{Feature, ReportedResult, StatedTest};
use tallyproof::text::Span;

/// One result under construction; every reading gets its own place.
#[derive(Default)]
pub struct Paper {
    pub readings: Readings,
    pub context: Context,
    pub result: ReportedResult,
    at: usize,
}

pub fn n(text: &str) -> Printed {
    Printed::parse(text).expect(text)
}

impl Paper {
    pub fn span(&mut self) -> Span {
        self.at += 10;
        Span::new(0, self.at, self.at + 5)
    }

    pub fn figure(&mut self, text: &str) -> Figure {
        Figure { printed: n(text), origin: Origin::Printed(self.span()) }
    }

    pub fn p(mut self, relation: Relation, value: &str) -> Paper {
        let span = self.span();
        let value = Printed::parse(value);
        let p = PValue { span, sentence: 0, relation, value, role: Role::Effect, corrected: false, shared: false };
        self.readings.p.push(p);
        self.result.p = Some(self.readings.p.len() - 1);
        self
    }

    pub fn group(&mut self) -> Group {
        Group {
            span: self.span(),
            sentence: 0,
            label: String::new(),
            n: None,
            events: None,
            total: None,
            percent: None,
            mean: None,
            median: None,
            spread_kind: None,
            spread: Vec::new(),
            change: false,
            approximate: false,
            one_expression: false,
        }
    }

    pub fn push(mut self, g: Group) -> Paper {
        self.readings.groups.push(g);
        self.result.groups.push(self.readings.groups.len() - 1);
        self
    }

    pub fn mean(mut self, size: &str, mean: &str, spread: &str, kind: SpreadKind) -> Paper {
        let size = self.figure(size);
        let g = Group {
            n: Some(size),
            mean: Some(n(mean)),
            spread: vec![n(spread)],
            spread_kind: Some(kind),
            ..self.group()
        };
        self.push(g)
    }

    pub fn count(mut self, events: &str, total: &str) -> Paper {
        let (events, total) = (Some(self.figure(events)), Some(self.figure(total)));
        let g = Group { events, total, ..self.group() };
        self.push(g)
    }

    pub fn percent_of(mut self, events: &str, total: &str, percent: &str) -> Paper {
        let (events, total) = (Some(self.figure(events)), Some(self.figure(total)));
        let g = Group { events, total, percent: Some(n(percent)), one_expression: true, ..self.group() };
        self.push(g)
    }

    pub fn estimate(mut self, measure: Measure, scale: Scale, value: &str) -> Paper {
        let span = self.span();
        let e =
            Estimate { span, sentence: 0, measure, scale, value: n(value), se: None, percent: false, adjusted: false };
        self.readings.estimates.push(e);
        self.result.estimate = Some(self.readings.estimates.len() - 1);
        self
    }

    pub fn se(mut self, se: &str) -> Paper {
        self.readings.estimates.last_mut().unwrap().se = Some(n(se));
        self
    }

    pub fn interval(mut self, lower: &str, upper: &str) -> Paper {
        let (span, level) = (self.span(), self.figure("95"));
        self.readings.intervals.push(IntervalReading {
            span,
            sentence: 0,
            level: Some(level),
            lower: n(lower),
            upper: n(upper),
            percent: false,
            credible: false,
            reversed: false,
            estimate: None,
        });
        self.result.interval = Some(self.readings.intervals.len() - 1);
        self
    }

    pub fn statistic(mut self, symbol: Symbol, df: [&str; 2], value: &str) -> Paper {
        let span = self.span();
        let df = df.map(|d| (!d.is_empty()).then(|| self.figure(d)));
        let [df1, df2] = df;
        let s = Statistic { span, sentence: 0, symbol, df1, df2, value: n(value), relation: Relation::Equal, n: None };
        self.readings.statistics.push(s);
        self.result.statistic = Some(self.readings.statistics.len() - 1);
        self
    }

    pub fn statistic_n(mut self, size: &str) -> Paper {
        let size = self.figure(size);
        self.readings.statistics.last_mut().unwrap().n = Some(size);
        self
    }

    pub fn test(mut self, test: Test, here: bool) -> Paper {
        let span = self.span();
        self.result.tests.push(StatedTest { test: Stated { value: test, span }, here });
        self
    }

    pub fn feature(mut self, feature: Feature) -> Paper {
        let span = self.span();
        self.result.features.push((feature, span));
        self
    }

    pub fn check(&self) -> Checked {
        recompute(&self.readings, &self.context, std::slice::from_ref(&self.result)).remove(0)
    }
}
