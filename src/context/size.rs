//! Group sizes that a sentence leaves to an earlier one: "pain was lower with the sling than without (5.2 ± 1.1 v 6.1 ± 1.0)",
//! where the arms were introduced as `sling (n = 24)` and `usual care (n = 25)`.

use super::Context;
use crate::manuscript::Manuscript;
use crate::reading::group::named::{self, Known};
use crate::reading::group::total;
use crate::reading::{Inference, Readings, Scan};

/// Fills the sizes of groups that a sentence sets side by side, where it names arms of known size and the order of names
/// and figures leaves no choice.
pub fn fill_sizes(manuscript: &Manuscript, scan: &Scan, readings: &mut Readings, context: &Context) {
    // More arms than a handful are subgroups, which share their names with others.
    if !(2..=4).contains(&context.arms.len()) {
        return;
    }
    let groups = &mut readings.groups;
    let known: Vec<Known> = context.arms.iter().map(|a| Known { label: &a.label, n: a.n, span: a.span }).collect();
    let mut from = 0;
    while from < groups.len() {
        let sentence = groups[from].sentence;
        let to = from + groups[from..].iter().take_while(|g| g.sentence == sentence).count();
        let here = &mut groups[from..to];
        if here.iter().any(|g| g.n.is_none() && g.events.is_none() && g.has_figure()) {
            let view = scan.view(manuscript, sentence);
            // Another study's arms may bear the same names.
            if !total::of_others(&view) {
                named::assign(&view, here, &known, Inference::ArmSize);
            }
        }
        from = to;
    }
}
