//! From bytes to a manuscript, one file per format. Reading never fails: what cannot be made out
//! becomes a notice.

mod html;
mod inline;
mod jats;
pub mod markdown;
mod outline;
pub mod plain;
mod tidy;

use crate::manuscript::{Manuscript, Source};
use crate::text::{EncodingName, LineIndex, declared, decode, is_latin};

/// Something about the file that the reader of a report should know, in one sentence.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Notice(pub String);

/// Why a file gives no manuscript at all. The text says what to do; the caller names the file.
#[derive(Clone, Debug, PartialEq, Eq)]
pub enum Unreadable {
    Empty,
    Binary,
    /// XML of another kind than JATS.
    OtherXml,
}

impl std::fmt::Display for Unreadable {
    fn fmt(&self, f: &mut std::fmt::Formatter<'_>) -> std::fmt::Result {
        f.write_str(match self {
            Unreadable::Empty => "the file holds no text; please check that it is the right one and was saved",
            Unreadable::Binary => {
                "this is not a text file; please save the manuscript as Markdown or plain text (UTF-8)"
            }
            Unreadable::OtherXml => {
                "this is XML, but not a JATS article; please give the journal's JATS file or save the manuscript as \
                 Markdown or plain text (UTF-8)"
            }
        })
    }
}

impl std::error::Error for Unreadable {}

/// The formats that intake reads.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Hash)]
pub enum Format {
    Markdown,
    Plain,
    Jats,
}

impl Format {
    /// The name in `source.format` of a report.
    pub fn name(self) -> &'static str {
        match self {
            Format::Markdown => "markdown",
            Format::Plain => "text",
            Format::Jats => "jats",
        }
    }
}

/// The most that is read of one file, so that offsets fit in 32 bits whatever the encoding.
const LONGEST: usize = 1 << 30;

/// Reads a file. The format is the one given, or the one that the name and the content suggest.
///
/// # Errors
/// Only a file without text, one that is no text at all, or XML of another kind gives no manuscript.
pub fn read(bytes: &[u8], name: &str, hint: Option<Format>) -> Result<(Manuscript, Vec<Notice>), Unreadable> {
    if is_binary(bytes) {
        return Err(Unreadable::Binary);
    }
    let mut notices = Vec::new();
    let decoded = decode(&bytes[..bytes.len().min(LONGEST)]);
    if decoded.text.trim().is_empty() {
        return Err(Unreadable::Empty);
    }
    if bytes.len() > LONGEST {
        notices.push(Notice("Only the first gigabyte was read; please split the file.".into()));
    }
    let declared = declared(bytes);
    if decoded.encoding == EncodingName::Windows1252 && !declared.as_deref().is_some_and(is_latin) {
        let text = "The file is not UTF-8 and was read as Windows-1252; please check that signs such as ± and – \
                    came through, or save it as UTF-8.";
        notices.push(Notice(text.into()));
    }
    if decoded.replaced > 0 {
        let places = if decoded.replaced == 1 { "one place".into() } else { format!("{} places", decoded.replaced) };
        let text = format!(
            "The file is damaged in {places}, shown there as \u{FFFD}; please check the original or save it again."
        );
        notices.push(Notice(text));
    }
    let format = hint.unwrap_or_else(|| format_of(name, &decoded.text));
    let (sections, blocks) = match format {
        Format::Markdown => markdown::blocks(&decoded.text),
        Format::Plain => plain::blocks(&decoded.text),
        Format::Jats if !jats::is_article(&decoded.text) => return Err(Unreadable::OtherXml),
        Format::Jats => {
            let article = jats::read(&decoded.text);
            notices.extend(article.notices);
            (article.sections, article.blocks)
        }
    };
    let source = Source { format: format.name(), lines: LineIndex::new(&decoded.text), decoded };
    Ok((Manuscript::new(sections, blocks, source), notices))
}

/// Files that other programs write, known by their first bytes; and anything that holds a NUL byte
/// and is not marked as UTF-16.
fn is_binary(bytes: &[u8]) -> bool {
    const MAGIC: &[&[u8]] =
        &[b"PK\x03\x04", b"%PDF-", b"\xD0\xCF\x11\xE0", b"{\\rtf", b"\x89PNG", b"\xFF\xD8\xFF", b"\x1F\x8B", b"GIF8"];
    let utf16: [&[u8]; 4] = [b"\xFF\xFE", b"\xFE\xFF", b"<\0?\0", b"\0<\0?"];
    let utf16 = utf16.iter().any(|m| bytes.starts_with(m));
    MAGIC.iter().any(|m| bytes.starts_with(m)) || (!utf16 && bytes.contains(&0))
}

/// The format: XML by its first words; else by the end of the name; else by content, where headings or
/// pipe tables make Markdown.
fn format_of(name: &str, text: &str) -> Format {
    if jats::is_xml(text) {
        return Format::Jats;
    }
    let ending = name.rsplit_once('.').map_or("", |(_, e)| e).to_ascii_lowercase();
    match ending.as_str() {
        "md" | "markdown" => Format::Markdown,
        "txt" | "text" => Format::Plain,
        "xml" | "nxml" => Format::Jats,
        _ if text.trim_start().starts_with("<article") => Format::Jats,
        _ if text.lines().any(is_markdown_line) => Format::Markdown,
        _ => Format::Plain,
    }
}

/// A heading (`## Results`) or the line under a table's header (`|---|:-:|`).
fn is_markdown_line(line: &str) -> bool {
    let hashes = line.bytes().take_while(|&b| b == b'#').count();
    if (1..=6).contains(&hashes) && line[hashes..].starts_with(' ') {
        return true;
    }
    let rule = line.trim();
    rule.contains('|') && rule.contains("--") && rule.bytes().all(|b| matches!(b, b'|' | b'-' | b':' | b' '))
}
