//! From bytes to a manuscript, one file per format. Reading never fails: what cannot be made out
//! becomes a notice.

pub mod markdown;
pub mod plain;

use crate::manuscript::Manuscript;

/// Something about the file that the reader of a report should know, in one sentence.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Notice(pub String);

/// Why a file gives no manuscript at all. The text says what to do.
#[derive(Clone, Debug, PartialEq, Eq)]
pub enum Unreadable {
    Empty,
    Binary,
}

#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Format {
    Markdown,
    Plain,
}

/// Reads a file of any kind. Interim until both readers stand.
pub fn read(_bytes: &[u8], _name: &str, _hint: Option<Format>) -> Result<(Manuscript, Vec<Notice>), Unreadable> {
    Err(Unreadable::Empty)
}
