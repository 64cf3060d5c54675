//! What an element of JATS (ANSI/NISO Z39.96, the Journal Article Tag Suite) is to a reader.

use crate::manuscript::{MarkKind, SectionKind};

/// What an element does to the text in it.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(super) enum Role {
    /// Nothing: its text runs on.
    Plain,
    /// Nothing in it is read.
    Skipped,
    /// Sub-articles: reviews, replies, translations.
    Attached,
    /// Text begins here.
    Body,
    Back,
    Floats,
    Abstract,
    /// A part with a title of its own.
    Section,
    ArticleTitle,
    Title,
    /// Its text stands apart from what is around it.
    Block,
    Item,
    /// A table or figure with its label, caption and notes.
    Float,
    Notes,
    Note,
    Label,
    Table,
    Part,
    Row,
    Cell,
    /// A line across.
    Rule,
    Break,
    Mark(MarkKind),
    /// A reference to the literature.
    Citation,
    /// A reference to a note.
    NoteMark,
    /// May hold one formula in several forms.
    Formula,
    Tex,
    Math,
    Picture,
}

/// The role of an element by its name without prefix and that of its parent.
pub(super) fn role(name: &str, parent: &str) -> Role {
    match name {
        "body" => Role::Body,
        "back" => Role::Back,
        "floats-group" | "floats-wrap" => Role::Floats,
        "abstract" => Role::Abstract,
        "sec" | "ack" | "app" | "app-group" | "notes" | "glossary" | "fn-group" => Role::Section,
        "article-title" if parent == "title-group" => Role::ArticleTitle,
        "title" => Role::Title,
        "p" | "list" | "def-list" | "disp-quote" | "boxed-text" | "verse-group" | "verse-line" | "speech"
        | "statement" | "question" | "answer" | "attrib" => Role::Block,
        "list-item" | "def-item" | "term" | "def" => Role::Item,
        "table-wrap" | "fig" | "chem-struct-wrap" => Role::Float,
        "fig-group" | "table-wrap-group" => Role::Block,
        "table-wrap-foot" => Role::Notes,
        "fn" => Role::Note,
        "label" => Role::Label,
        "table" => Role::Table,
        "thead" | "tbody" | "tfoot" => Role::Part,
        "tr" => Role::Row,
        "td" | "th" => Role::Cell,
        "hr" => Role::Rule,
        "break" => Role::Break,
        "sup" => Role::Mark(MarkKind::Superscript),
        "sub" => Role::Mark(MarkKind::Subscript),
        "italic" => Role::Mark(MarkKind::Emphasis),
        "bold" => Role::Mark(MarkKind::Strong),
        "monospace" | "code" | "preformat" => Role::Mark(MarkKind::Code),
        "ext-link" | "uri" | "email" => Role::Mark(MarkKind::Link),
        "inline-formula" | "disp-formula" | "alternatives" => Role::Formula,
        "tex-math" => Role::Tex,
        "math" => Role::Math,
        "graphic" | "inline-graphic" => Role::Picture,
        "sub-article" | "response" => Role::Attached,
        "ref-list"
        | "contrib-group"
        | "author-notes"
        | "aff"
        | "bio"
        | "supplementary-material"
        | "media"
        | "object-id"
        | "alt-text"
        | "long-desc"
        | "permissions"
        | "kwd-group"
        | "sec-meta"
        | "index-term"
        | "trans-abstract"
        | "trans-title-group"
        | "colgroup"
        | "col"
        | "processing-meta"
        | "annotation"
        | "annotation-xml"
        | "counts"
        | "custom-meta-group" => Role::Skipped,
        _ => Role::Plain,
    }
}

/// Abstracts that repeat the manuscript for another use.
pub(super) fn is_other_abstract(kind: &str) -> bool {
    matches!(kind, "graphical" | "teaser" | "toc" | "precis" | "video" | "web-summary" | "short")
}

/// The kind of section that `sec-type` names: `methods`, `materials|methods`, `intro`, `COI-statement`.
pub(super) fn kind_of_type(types: &str) -> Option<SectionKind> {
    types.split('|').find_map(|t| match t {
        "intro" => Some(SectionKind::Introduction),
        "cases" => Some(SectionKind::Results),
        "COI-statement" | "supplementary-material" | "data-availability" => Some(SectionKind::Back),
        // Tables and figures that the publisher set behind the references are those of the results.
        "display-objects" => Some(SectionKind::Results),
        t => SectionKind::of_title(t),
    })
}
