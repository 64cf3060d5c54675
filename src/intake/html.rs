//! The text of an HTML block inside Markdown. No tree: tags are dropped or end a paragraph.

use std::ops::Range;

/// What an HTML block is made of, in order.
#[derive(Debug, PartialEq)]
pub(super) enum Part {
    Text(Range<usize>),
    /// A character reference and the characters that it stands for.
    Entity(String, Range<usize>),
    Space(Range<usize>),
    /// A tag inside a line of text.
    Tag(Range<usize>),
    /// A tag that ends a paragraph.
    Break,
}

/// Elements that stand within a line; every other tag ends a paragraph.
const INLINE: &[&str] = &[
    "a", "abbr", "b", "br", "cite", "code", "del", "em", "font", "i", "img", "ins", "mark", "q", "s", "small", "span",
    "strong", "sub", "sup", "td", "th", "tt", "u", "var",
];

/// Takes `range` of the source apart. Comments, scripts and styles are dropped.
pub(super) fn parts(source: &str, range: Range<usize>) -> Vec<Part> {
    let mut parts = Vec::new();
    let text = &source[..range.end];
    // Found once, so that openings without an end cost no search each.
    let ends = ["-->", "</script", "</style"].map(|end| source[range.clone()].rfind(end).map(|i| range.start + i));
    let (mut at, mut plain) = (range.start, range.start);
    while at < range.end {
        let b = text.as_bytes()[at];
        let (part, end) = match b {
            b'<' => match tag(text, at, &ends) {
                Some((part, end)) => (part, end),
                None => {
                    at += 1;
                    continue;
                }
            },
            b'&' => match entity(text, at) {
                Some((decoded, end)) => (Some(Part::Entity(decoded, at..end)), end),
                None => {
                    at += 1;
                    continue;
                }
            },
            b' ' | b'\n' | b'\r' | b'\t' => {
                let rest = &text[at..];
                let end = at + (rest.len() - rest.trim_start_matches([' ', '\n', '\r', '\t']).len());
                (Some(Part::Space(at..end)), end)
            }
            _ => {
                at += 1;
                continue;
            }
        };
        if plain < at {
            parts.push(Part::Text(plain..at));
        }
        parts.extend(part);
        (at, plain) = (end, end);
    }
    if plain < range.end {
        parts.push(Part::Text(plain..range.end));
    }
    parts
}

/// The tag, comment, script or style that starts at `at`, and where it ends.
fn tag(text: &str, at: usize, ends: &[Option<usize>; 3]) -> Option<(Option<Part>, usize)> {
    let rest = &text[at..];
    let closes = |i: usize| ends[i].is_some_and(|last| last > at);
    if rest.starts_with("<!--") {
        return if closes(0) { Some((None, at + rest.find("-->")? + 3)) } else { None };
    }
    let name = rest[1..].trim_start_matches('/');
    if !name.starts_with(|c: char| c.is_ascii_alphabetic() || c == '!' || c == '?') {
        return None;
    }
    let name = &name[..name.find(|c: char| !c.is_ascii_alphanumeric()).unwrap_or(name.len()).min(16)];
    let name = name.to_ascii_lowercase();
    // A tag that does not end within reason is text; so the search stays short.
    let window = &rest.as_bytes()[..rest.len().min(4096)];
    let end = at + window.iter().position(|&b| b == b'>')? + 1;
    if (name == "script" && closes(1)) || (name == "style" && closes(2)) {
        let close = text[end..].find(&format!("</{name}")).map_or(end, |i| end + i);
        return Some((Some(Part::Break), close));
    }
    let part = match name.as_str() {
        "td" | "th" => Part::Space(at..end),
        _ if INLINE.contains(&name.as_str()) => Part::Tag(at..end),
        _ => Part::Break,
    };
    Some((Some(part), end))
}

/// A character reference: numeric, or one of the few names that figures need.
fn entity(text: &str, at: usize) -> Option<(String, usize)> {
    const NAMES: &[(&str, &str)] = &[
        ("amp", "&"),
        ("lt", "<"),
        ("gt", ">"),
        ("quot", "\""),
        ("apos", "'"),
        ("nbsp", "\u{a0}"),
        ("minus", "−"),
        ("plusmn", "±"),
        ("le", "≤"),
        ("ge", "≥"),
        ("ndash", "–"),
        ("mdash", "—"),
        ("times", "×"),
        ("middot", "·"),
        ("thinsp", "\u{2009}"),
        ("ensp", "\u{2002}"),
        ("emsp", "\u{2003}"),
        ("chi", "χ"),
        ("alpha", "α"),
        ("beta", "β"),
        ("eta", "η"),
        ("mu", "μ"),
        ("kappa", "κ"),
        ("rho", "ρ"),
        ("sup2", "²"),
        ("deg", "°"),
        ("dagger", "†"),
        ("Dagger", "‡"),
        ("sect", "§"),
        ("para", "¶"),
    ];
    let body = &text.as_bytes()[at + 1..text.len().min(at + 12)];
    let length = body.iter().position(|&b| b == b';')?;
    let name = text.get(at + 1..at + 1 + length)?;
    let decoded = match name.strip_prefix('#') {
        Some(number) => {
            let code = match number.strip_prefix(['x', 'X']) {
                Some(hex) => u32::from_str_radix(hex, 16).ok()?,
                None => number.parse().ok()?,
            };
            char::from_u32(code).filter(|&c| c != '\0')?.to_string()
        }
        None => NAMES.iter().find(|(n, _)| *n == name)?.1.to_string(),
    };
    Some((decoded, at + length + 2))
}
