//! Tokens: words, numbers and signs, with their typographic variants already levelled.

use super::lexicon::Classes;
use crate::printed::Printed;

/// How a token is set.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Hash)]
pub enum Style {
    Plain,
    Superscript,
    Subscript,
}

#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum TokenKind {
    /// A run of letters (with inner apostrophes); hyphenated words are several tokens around `Sign('-')`.
    Word,
    /// Without sign: `-0.5` is `Sign('-')` then a number. Thousands separators and decimal marks are levelled.
    Number(Printed),
    /// One sign, levelled: every minus, hyphen and dash is `-`; `⩽ ≤ ≦` are `≤`; `‹ ＜` are `<`;
    /// `∙ ⋅` outside numbers are `·`; all other characters stand for themselves.
    Sign(char),
}

/// A token of a block's canonical text.
#[derive(Clone, Copy, Debug)]
pub struct Token {
    pub start: u32,
    pub end: u32,
    pub kind: TokenKind,
    pub style: Style,
    /// White space (or the block's start) stands before it.
    pub spaced: bool,
    /// What the lexicon knows of a word; empty for numbers and signs.
    pub classes: Classes,
}

impl Token {
    pub fn is_sign(&self, sign: char) -> bool {
        self.kind == TokenKind::Sign(sign)
    }

    pub fn number(&self) -> Option<Printed> {
        match self.kind {
            TokenKind::Number(p) => Some(p),
            _ => None,
        }
    }

    pub fn is_word(&self) -> bool {
        self.kind == TokenKind::Word
    }

    pub fn is(&self, class: Classes) -> bool {
        self.classes.meets(class)
    }
}
