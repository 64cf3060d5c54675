//! Joining inside one sentence: which figures belong to which p.

use super::{Feature, MOST_TESTS, ReportedResult, StatedTest, feature};
use crate::context::{Stated, tests_in};
use crate::reading::{Group, Measure, Readings, Relation, Scale, SentenceView, within};
use crate::text::Span;
use std::ops::Range;

/// Indexes of one sentence's readings, in each list.
#[derive(Clone, Debug)]
pub(super) struct Members {
    pub p: Range<usize>,
    pub intervals: Range<usize>,
    pub statistics: Range<usize>,
    pub groups: Range<usize>,
    pub estimates: Range<usize>,
}

/// A stretch of the sentence that ends with a p (or a list of them) and what stands in it.
#[derive(Clone, Debug, Default)]
struct Segment {
    p: Vec<usize>,
    intervals: Vec<usize>,
    statistics: Vec<usize>,
    groups: Vec<usize>,
    estimates: Vec<usize>,
}

pub(super) fn join(view: &SentenceView, members: &Members, readings: &Readings, out: &mut Vec<ReportedResult>) {
    let start = out.len();
    for segment in segments(view, members, readings) {
        results_of(view, &segment, readings, out);
    }
    // Count, total and percent of one group are a result of their own.
    for g in members.groups.clone() {
        let group = &readings.groups[g];
        if group.events.is_some() && group.percent.is_some() {
            out.push(ReportedResult { groups: vec![g], ..ReportedResult::default() });
        }
    }
    if out.len() == start {
        return;
    }
    let words = feature::of_words(view);
    let here: Vec<Stated<_>> = tests_in(view)
        .into_iter()
        .take(MOST_TESTS)
        .map(|(value, first, last)| Stated { value, span: view.span(first, last) })
        .collect();
    for result in &mut out[start..] {
        describe(view, result, readings, &words, &here);
    }
}

/// Cuts a sentence at its p-values.
fn segments(view: &SentenceView, members: &Members, readings: &Readings) -> Vec<Segment> {
    let ps: Vec<usize> = members.p.clone().collect();
    // A list of p's ("p = 0.02 and 0.4, respectively") ends one segment.
    let mut lists: Vec<Vec<usize>> = Vec::new();
    for &i in &ps {
        let joined = lists.last().and_then(|l| l.last()).is_some_and(|&previous| {
            let (a, b) = (view.token_at(readings.p[previous].span.end), view.token_at(readings.p[i].span.start));
            b.saturating_sub(a) <= 3
                && (a..b).all(|k| view.signs(k, &[',', ';', '/']) || view.any(k, &["and", "or", "both"]))
        });
        match lists.last_mut() {
            Some(list) if joined => list.push(i),
            _ => lists.push(vec![i]),
        }
    }
    // Where each list's segment ends: behind figures that stand in the same bracket, or after a comma, with no word between.
    let mut ends: Vec<u32> = Vec::new();
    for (k, list) in lists.iter().enumerate() {
        let last = readings.p[list[list.len() - 1]].span.end;
        let limit = lists.get(k + 1).map_or(u32::MAX, |next| readings.p[next[0]].span.start);
        ends.push(trailing(view, members, readings, last, limit));
    }
    let mut segments: Vec<Segment> =
        lists.into_iter().map(|p| Segment { p, ..Segment::default() }).chain([Segment::default()]).collect();
    let number = |span: Span| ends.partition_point(|&e| e <= span.start);
    members.intervals.clone().for_each(|i| segments[number(readings.intervals[i].span)].intervals.push(i));
    members.statistics.clone().for_each(|i| segments[number(readings.statistics[i].span)].statistics.push(i));
    // A group of which only the size is told is compared with none.
    let groups = members.groups.clone().filter(|&i| readings.groups[i].has_figure());
    groups.for_each(|i| segments[number(readings.groups[i].span)].groups.push(i));
    members.estimates.clone().for_each(|i| segments[number(readings.estimates[i].span)].estimates.push(i));
    hand_back(&mut segments, readings);
    // Figures behind the last p, where none stand before it: `p < 0.001 (5.2 ± 1.1 v 6.1 ± 1.0)`.
    if segments.len() >= 2 {
        let tail = segments.pop().unwrap_or_default();
        let last = segments.len() - 1;
        let bare = {
            let s = &segments[last];
            s.groups.is_empty() && s.intervals.is_empty() && s.statistics.is_empty()
        };
        if bare && tail.groups.len() >= 2 && tail.intervals.is_empty() {
            segments[last].groups = tail.groups.clone();
            segments[last].estimates.extend(&tail.estimates);
            segments.push(Segment { statistics: tail.statistics, ..Segment::default() });
        } else {
            segments.push(tail);
        }
    }
    segments
}

/// Where a p's own figures end behind it.
fn trailing(view: &SentenceView, members: &Members, readings: &Readings, mut end: u32, limit: u32) -> u32 {
    let next_of = |from: u32| {
        // Both lists are in order of their starts.
        let intervals = &readings.intervals[members.intervals.clone()];
        let interval = intervals.get(intervals.partition_point(|i| i.span.start < from)).map(|i| i.span);
        let estimates = &readings.estimates[members.estimates.clone()];
        let estimate = estimates.get(estimates.partition_point(|e| e.span.start < from)).map(|e| e.span);
        // An estimate comes with the interval that is printed for it, or not at all.
        let whole = |e: Span| {
            let its = intervals.iter().find(|i| i.estimate.is_some_and(|(_, of)| of.end == e.end));
            its.map_or(e, |i| if i.span.start > e.start { e.to(i.span) } else { e })
        };
        let estimate = estimate.map(whole);
        interval.into_iter().chain(estimate).min_by_key(|s| s.start)
    };
    while let Some(span) = next_of(end) {
        if span.end > limit {
            break;
        }
        let (a, b) = (view.token_at(end), view.token_at(span.start));
        let linked = b.saturating_sub(a) <= 4
            && (a..b).all(|k| {
                view.signs(k, &[',', ';', ')', '(', '[', ']', '=', ':']) || view.any(k, &["with", "partial", "cohen"])
            });
        // `(difference 0.3, p = 0.04, bootstrap 95% CI 0.1 to 0.5)`: all in one bracket
        let close = linked || b.saturating_sub(a) <= 9 && in_one_bracket(view, a, b);
        // In `(p = 0.02) and OR 1.2 (…), p = 0.4` the figures belong to the next p.
        let own = limit == u32::MAX || (view.token_at(limit).saturating_sub(view.token_at(span.end)) > 3);
        if !close || !own {
            break;
        }
        end = span.end;
    }
    end
}

/// Whether the tokens `from..to` stand in one open bracket.
fn in_one_bracket(view: &SentenceView, from: usize, to: usize) -> bool {
    let opened = (from.saturating_sub(40)..from)
        .rev()
        .find(|&k| view.signs(k, &['(', '[', ')', ']']))
        .is_some_and(|k| view.signs(k, &['(', '[']));
    opened && !(from..to).any(|k| view.signs(k, &['(', ')', '[', ']', ';']))
}

/// An interval that stands before a statistic belongs to the p before it, where that one has a statistic and no
/// interval: `F = 0.2, p = 0.6, difference 0.1, 95% CI …, nor …, F = 0.3, p = 0.5`.
fn hand_back(segments: &mut [Segment], readings: &Readings) {
    for k in 1..segments.len() {
        let (before, after) = segments.split_at_mut(k);
        let (previous, next) = (&mut before[k - 1], &mut after[0]);
        let Some(&statistic) = next.statistics.first() else { continue };
        let at = readings.statistics[statistic].span.start;
        let led = !previous.statistics.is_empty() && previous.intervals.is_empty() && !previous.p.is_empty();
        if !led {
            continue;
        }
        let early = |span: Span| span.end <= at;
        previous.intervals.extend(next.intervals.iter().filter(|&&i| early(readings.intervals[i].span)));
        previous.estimates.extend(next.estimates.iter().filter(|&&e| early(readings.estimates[e].span)));
        next.intervals.retain(|&i| !early(readings.intervals[i].span));
        next.estimates.retain(|&e| !early(readings.estimates[e].span));
    }
}

/// The results of one segment.
fn results_of(view: &SentenceView, s: &Segment, readings: &Readings, out: &mut Vec<ReportedResult>) {
    let start = out.len();
    let p_at = |k: usize| s.p.get(k.min(s.p.len().saturating_sub(1))).copied();
    let estimate_of = |interval: usize| {
        let (_, span) = readings.intervals[interval].estimate?;
        s.estimates.iter().copied().find(|&e| readings.estimates[e].span.end == span.end)
    };
    let beside = within(&readings.intervals, |i| i.sentence, view.id..view.id + 1);
    let has_interval = |e: usize| {
        let end = readings.estimates[e].span.end;
        beside.iter().any(|i| i.estimate.is_some_and(|(_, of)| of.end == end))
    };
    // The interval of one group's mean or share stands by itself: the p beside it compares groups.
    let own = |&i: &usize| {
        estimate_of(i).is_some_and(|e| {
            readings.estimates[e].scale == Scale::Single && readings.estimates[e].measure == Measure::Other
        })
    };
    let (single, intervals): (Vec<usize>, Vec<usize>) = s.intervals.iter().copied().partition(own);
    for &interval in &single {
        out.push(ReportedResult { interval: Some(interval), estimate: estimate_of(interval), ..Default::default() });
    }
    let compared = compared_groups(view, s, readings);
    let many = intervals.len().max(s.statistics.len());
    if many == 0 {
        lists_of_groups(s, &compared, readings, out);
    }
    // One result for each interval, with its statistic by order where there are as many.
    for (k, &interval) in intervals.iter().enumerate() {
        let groups = share(&compared, k, intervals.len());
        let statistic = if s.statistics.len() == intervals.len() { s.statistics.get(k).copied() } else { None };
        out.push(ReportedResult {
            p: p_for(s, k, intervals.len(), readings).then(|| p_at(k)).flatten(),
            interval: Some(interval),
            statistic,
            estimate: estimate_of(interval)
                .or_else(|| s.estimates.last().copied().filter(|&e| intervals.len() == 1 && !has_interval(e))),
            groups,
            ..ReportedResult::default()
        });
    }
    if intervals.is_empty() || s.statistics.len() != intervals.len() {
        for (k, &statistic) in s.statistics.iter().enumerate() {
            let has_p = intervals.is_empty() || k + 1 == s.statistics.len();
            out.push(ReportedResult {
                p: (has_p && p_for(s, k, s.statistics.len(), readings)).then(|| p_at(k)).flatten(),
                statistic: Some(statistic),
                estimate: if s.statistics.len() == 1 { s.estimates.last().copied() } else { None },
                groups: share(&compared, k, s.statistics.len()),
                ..ReportedResult::default()
            });
        }
    }
    // Every p is in a result.
    for &p in &s.p {
        if out[start..].iter().all(|r| r.p != Some(p)) {
            out.push(ReportedResult { p: Some(p), ..ReportedResult::default() });
        }
    }
    // An estimate that nothing took, with the two groups that it compares.
    for &e in &s.estimates {
        if out[start..].iter().all(|r| r.estimate != Some(e)) {
            let groups = if compared.len() == 2 { compared.clone() } else { Vec::new() };
            out.push(ReportedResult { estimate: Some(e), groups, ..ReportedResult::default() });
        }
    }
}

/// Whether the `k`-th of `count` results in a segment has a p: by order, or one p for all.
fn p_for(s: &Segment, k: usize, count: usize, readings: &Readings) -> bool {
    match s.p.len() {
        0 => false,
        1 => {
            let p = &readings.p[s.p[0]];
            count == 1 || k + 1 == count || p.shared || p.relation != Relation::Equal
        }
        n => n == count || k + n >= count,
    }
}

/// Results of groups without interval or statistic: a list of p's shares the groups by order.
fn lists_of_groups(s: &Segment, compared: &[usize], readings: &Readings, out: &mut Vec<ReportedResult>) {
    if s.p.is_empty() {
        return;
    }
    let count = s.p.len();
    let estimate = if s.estimates.len() == 1 { s.estimates.first().copied() } else { None };
    if count > 1 && compared.len() == 2 * count {
        for (k, &p) in s.p.iter().enumerate() {
            // `A 1 and B 2 … 3 and 4 … respectively`: pairs side by side
            let groups = vec![compared[2 * k], compared[2 * k + 1]];
            out.push(ReportedResult { p: Some(p), groups, ..ReportedResult::default() });
        }
        return;
    }
    for (k, &p) in s.p.iter().enumerate() {
        let mut result = ReportedResult { p: Some(p), estimate, ..ReportedResult::default() };
        if count == 1 || compared.len() <= 2 && k + 1 == count {
            result.groups = compared.to_vec();
        } else if !compared.is_empty() {
            result.groups = compared.to_vec();
            result.features.push((Feature::Unclear, readings.p[p].span));
        }
        out.push(result);
    }
}

/// What a group is a summary of, as far as comparing goes.
fn kind(group: &Group) -> (bool, bool, bool) {
    (group.mean.is_some(), group.median.is_some(), group.events.is_some() || group.percent.is_some())
}

/// The groups that a segment's p (or estimate) compares: the last run of summaries of one kind.
fn compared_groups(view: &SentenceView, s: &Segment, readings: &Readings) -> Vec<usize> {
    let Some(&last) = s.groups.last() else { return Vec::new() };
    let mut run = vec![last];
    for &g in s.groups.iter().rev().skip(1) {
        let (group, next) = (&readings.groups[g], &readings.groups[run[run.len() - 1]]);
        let gap = view.token_at(next.span.start).saturating_sub(view.token_at(group.span.end));
        let clause = (view.token_at(group.span.end)..view.token_at(next.span.start)).any(|k| view.sign(k, ';'));
        let alike = kind(group) == kind(next) && group.spread_kind.is_some() == next.spread_kind.is_some();
        if !alike || gap > 24 || (clause && run.len() >= 2) {
            break;
        }
        run.push(g);
    }
    run.reverse();
    run
}

/// The groups of the `k`-th of `count` results: all, or the `k`-th pair of a list.
fn share(groups: &[usize], k: usize, count: usize) -> Vec<usize> {
    if count <= 1 {
        return groups.to_vec();
    }
    if groups.len() == 2 * count {
        return vec![groups[2 * k], groups[2 * k + 1]];
    }
    Vec::new()
}

/// Adds tests and features to a result.
fn describe(
    view: &SentenceView,
    result: &mut ReportedResult,
    readings: &Readings,
    words: &[(Feature, Span)],
    here: &[Stated<crate::context::Test>],
) {
    let alone =
        result.groups.len() == 1 && result.p.is_none() && result.interval.is_none() && result.statistic.is_none();
    if alone && result.estimate.is_none() {
        return;
    }
    let mut add = |feature: Feature, span: Span| {
        if result.features.iter().all(|&(f, _)| f != feature) {
            result.features.push((feature, span));
        }
    };
    for &(feature, span) in words {
        add(feature, span);
    }
    for test in here {
        if let Some(feature) = feature::of_test(test.value) {
            add(feature, test.span);
        }
    }
    if let Some(p) = result.p.map(|p| &readings.p[p])
        && let Some(feature) = feature::of_p(p)
    {
        add(feature, p.span);
    }
    if let Some(p) = result.p.map(|p| &readings.p[p])
        && here.is_empty()
        && names_other_analysis(view, p.span)
    {
        add(Feature::Unclear, p.span);
    }
    if let Some(e) = result.estimate.map(|e| &readings.estimates[e]).filter(|e| e.adjusted) {
        add(Feature::Adjusted, e.span);
    }
    for (feature, span) in feature::of_groups(view, readings, &result.groups) {
        add(feature, span);
    }
    // Three groups in one list are compared as three; more may be two by two, or before and after.
    if (result.groups.len() > 3 || result.groups.len() == 3 && !one_list(view, readings, &result.groups))
        && let Some(&g) = result.groups.first()
    {
        add(Feature::Unclear, readings.groups[g].span);
    }
    result.tests.extend(here.iter().map(|&test| StatedTest { test, here: true }));
}

/// An analysis that is named in the p's own bracket and that we do not know: `(P < 0.01, ridit analysis)`.
fn names_other_analysis(view: &SentenceView, p: Span) -> bool {
    let at = view.token_at(p.start);
    let open = (at.saturating_sub(8)..at)
        .rev()
        .find(|&k| view.signs(k, &['(', '[', ')', ']']))
        .filter(|&k| view.signs(k, &['(', '[']));
    let Some(open) = open else { return false };
    let close = (at..(at + 14).min(view.len())).find(|&k| view.signs(k, &[')', ']'])).unwrap_or(at);
    (open..close).any(|k| view.any(k, &["analysis", "analyses", "test", "tests", "model", "regression", "statistic"]))
}

/// Groups that one list tells one after the other, each with spread and size.
fn one_list(view: &SentenceView, readings: &Readings, groups: &[usize]) -> bool {
    const GAP: usize = 8;
    let complete = groups.iter().all(|&g| {
        let g = &readings.groups[g];
        g.n.is_some() && (!g.spread.is_empty() || g.events.is_some())
    });
    let close = groups.windows(2).all(|w| {
        let (a, b) = (readings.groups[w[0]].span, readings.groups[w[1]].span);
        view.token_at(b.start).saturating_sub(view.token_at(a.end)) <= GAP
    });
    complete && close
}
