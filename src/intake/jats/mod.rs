//! JATS, the XML in which journals exchange articles (ANSI/NISO Z39.96).
//!
//! One walk over the events of the parser, with the open elements on a stack of our own: no depth
//! of nesting costs a call, and what is not closed is closed by what surrounds it.

mod cite;
mod element;
mod entities;
mod math;
mod reader;
mod slips;
mod table;

use super::Notice;
use crate::manuscript::{Block, Section};
use entities::Entities;
use quick_xml::Reader as Parser;
use quick_xml::events::Event;
use reader::{Reader, Tag};
use std::ops::Range;

/// Markup that does not end is passed over this often; then reading stops.
const MOST_SLIPS: usize = 16;

/// What was read of an article.
pub(super) struct Article {
    pub sections: Vec<Section>,
    pub blocks: Vec<Block>,
    pub notices: Vec<Notice>,
}

/// Whether a text is XML by its first words.
pub(super) fn is_xml(text: &str) -> bool {
    let text = text.trim_start();
    let starts = |word: &str| text.get(..word.len()).is_some_and(|t| t.eq_ignore_ascii_case(word));
    starts("<?xml") || starts("<!doctype article")
}

/// Whether XML holds a JATS article: its first element is one, or wraps one.
pub(super) fn is_article(text: &str) -> bool {
    let Some(root) = root(text) else { return false };
    if local(root) == "article" {
        return true;
    }
    // Archives wrap articles in elements of their own.
    ["<article ", "<article>"].iter().any(|a| text.contains(a))
        && ["<front>", "<front ", "<body>", "<body "].iter().any(|b| text.contains(b))
}

/// The name of the first element.
fn root(text: &str) -> Option<&str> {
    let mut rest = text.trim_start_matches(['\u{feff}', ' ', '\t', '\r', '\n']);
    loop {
        let inner = rest.strip_prefix('<')?;
        let end = if inner.starts_with("!--") {
            inner.find("-->")? + 3
        } else if inner.starts_with('?') {
            inner.find("?>")? + 2
        } else if inner.starts_with('!') {
            let close = inner.find('>')?;
            match inner[..close].find('[') {
                Some(open) => {
                    let subset = open + inner[open..].find(']')?;
                    subset + inner[subset..].find('>')? + 1
                }
                None => close + 1,
            }
        } else {
            let end = inner.find(|c: char| c.is_whitespace() || matches!(c, '>' | '/'))?;
            return Some(&inner[..end]);
        };
        rest = inner[end..].trim_start();
    }
}

/// A name without its prefix.
fn local(name: &str) -> &str {
    name.rsplit_once(':').map_or(name, |(_, n)| n)
}

/// Reads an article as far as it goes.
pub(super) fn read(source: &str) -> Article {
    let mut entities = Entities::new(source);
    let mut reader = Reader::new(source);
    let mut at = 0;
    let mut slips = 0;
    // The parser starts anew behind what it cannot take.
    while let Some(start) = pass(source, at, &mut reader, &mut entities) {
        reader.damage(start);
        slips += 1;
        let Some(end) = source[start..].find('>').filter(|_| slips <= MOST_SLIPS) else { break };
        at = start + end + 1;
    }
    reader.finish()
}

/// Reads on from `at`; where it stumbled, if it did.
fn pass<'a>(source: &'a str, mut at: usize, reader: &mut Reader<'a>, entities: &mut Entities<'a>) -> Option<usize> {
    'anew: loop {
        // The parser would drop a byte order mark without counting it.
        while source[at..].starts_with('\u{feff}') {
            at += 3;
        }
        let mut parser = Parser::from_str(&source[at..]);
        let config = parser.config_mut();
        config.check_end_names = false;
        config.allow_unmatched_ends = true;
        config.allow_dangling_amp = true;
        config.check_comments = false;
        let base = at;
        loop {
            let start = base + parser.buffer_position() as usize;
            if is_bare_less_than(&source[start..]) {
                reader.damage(start);
                reader.text(start..start + 1);
                at = start + 1;
                continue 'anew;
            }
            let event = parser.read_event();
            let range = start..base + parser.buffer_position() as usize;
            match event {
                Err(_) => return Some(start),
                Ok(Event::Eof) => return None,
                Ok(event) => take(source, event, range, reader, entities),
            }
        }
    }
}

/// `P < 0.05` with a sign that should have been escaped.
fn is_bare_less_than(text: &str) -> bool {
    let mut chars = text.chars();
    chars.next() == Some('<')
        && chars.next().is_none_or(|c| !(c.is_alphabetic() || matches!(c, '_' | ':' | '/' | '!' | '?')))
}

fn take<'a>(
    source: &'a str,
    event: Event<'a>,
    range: Range<usize>,
    reader: &mut Reader<'a>,
    entities: &mut Entities<'a>,
) {
    match event {
        Event::Start(tag) => {
            let name = slice(source, range.start + 1, tag.name().into_inner().len());
            reader.start(&Tag { name: local(name), range, attributes: tag.attributes_raw() });
        }
        Event::Empty(tag) => {
            let name = local(slice(source, range.start + 1, tag.name().into_inner().len()));
            reader.start(&Tag { name, range: range.clone(), attributes: tag.attributes_raw() });
            reader.end(name, range);
        }
        Event::End(tag) => {
            let name = slice(source, range.start + 2, tag.name().into_inner().len());
            reader.end(local(name), range);
        }
        Event::Text(_) => reader.text(range),
        Event::CData(text) => {
            let start = range.start + "<![CDATA[".len();
            reader.text(start..start + text.len());
        }
        Event::GeneralRef(_) => {
            let name = slice(source, range.start + 1, range.len().saturating_sub(2));
            reader.reference(name, range, entities);
        }
        Event::DocType(text) => {
            let length = text.len();
            entities.declare(slice(source, range.end - 1 - length.min(range.len() - 1), length));
        }
        Event::Comment(_) | Event::PI(_) | Event::Decl(_) | Event::Eof => {}
    }
}

fn slice(source: &str, start: usize, length: usize) -> &str {
    source.get(start..start + length).unwrap_or("")
}
