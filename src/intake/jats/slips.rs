//! What the reader of a report should know about the file.

use crate::intake::Notice;

/// What was met on the way.
#[derive(Default)]
pub(super) struct Slips<'a> {
    /// Where the XML is not well-formed for the first time.
    pub damage: Option<usize>,
    pub too_deep: bool,
    /// Entities that nothing declares.
    pub unknown: Vec<&'a str>,
    /// An entity that expands beyond reason.
    pub too_large: bool,
    /// Tables that are pictures.
    pub pictures: usize,
    /// Reviews, replies, translations.
    pub attached: bool,
    pub articles: usize,
}

impl Slips<'_> {
    /// One sentence for each; `text` says whether any was found.
    pub fn notices(&self, source: &str, truncated: bool, text: bool) -> Vec<Notice> {
        let mut says = Vec::new();
        if truncated {
            says.push("The file ends before the article does; please check that it is whole.".to_owned());
        }
        if let Some(at) = self.damage {
            let line = 1 + source.as_bytes()[..at].iter().filter(|&&b| b == b'\n').count();
            says.push(format!(
                "The XML is not well-formed (first in line {line}); what could be made out was read, please check it there."
            ));
        }
        if self.too_deep {
            says.push(
                "The XML nests its elements deeper than any article does; please check where it comes from.".into(),
            );
        }
        if !self.unknown.is_empty() {
            let names: Vec<String> =
                self.unknown.iter().map(|n| format!("&{};", n.chars().take(24).collect::<String>())).collect();
            says.push(format!(
                "Some characters are named in a way that is not known here and stand as written: {}.",
                names.join(", ")
            ));
        }
        if self.too_large {
            says.push(
                "Entities that expand beyond reason were left as written; please check where the file comes from."
                    .into(),
            );
        }
        if self.pictures > 0 {
            let tables = if self.pictures == 1 {
                "One table is a picture".into()
            } else {
                format!("{} tables are pictures", self.pictures)
            };
            says.push(format!("{tables}, whose figures were not read."));
        }
        if self.attached {
            says.push("What is attached to the article (reviews, replies, translations) was not read.".into());
        }
        if self.articles > 1 {
            says.push(format!("The file holds {} articles; only the first was read.", self.articles));
        }
        if !text {
            says.push("No title, abstract or body was found in the article; please check that it is whole.".into());
        }
        says.into_iter().map(Notice).collect()
    }
}
