//! The one scan: blocks to tokens and sentences, and the view that recognisers read through.

use super::lexicon;
use super::token::{Style, Token, TokenKind};
use crate::manuscript::{Block, BlockKind, Manuscript, MarkKind};
use crate::printed::Printed;
use crate::text::Span;

/// A sentence of running text: tokens `first..last` of the scan.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub struct Sentence {
    pub block: u32,
    pub first: u32,
    pub last: u32,
}

/// All tokens and sentences of a manuscript. Tables are scanned cell by cell, each cell a sentence.
#[derive(Clone, Debug, Default)]
pub struct Scan {
    pub tokens: Vec<Token>,
    pub sentences: Vec<Sentence>,
    /// Number of the first sentence of each block, and one past the last block.
    pub block_sentences: Vec<u32>,
}

impl Scan {
    /// The sentences of a block, by number.
    pub fn of_block(&self, block: usize) -> std::ops::Range<u32> {
        self.block_sentences[block]..self.block_sentences[block + 1]
    }

    pub fn view<'a>(&'a self, manuscript: &'a Manuscript, id: u32) -> SentenceView<'a> {
        let s = self.sentences[id as usize];
        SentenceView {
            text: &manuscript.blocks[s.block as usize].text,
            tokens: &self.tokens[s.first as usize..s.last as usize],
            block: s.block,
            id,
        }
    }
}

/// Tokens after which a sentence is cut, and a table's cell left. No real sentence is as long; text without full stops
/// is, and what looks around within its sentence would take the square of its length.
const LONGEST: usize = 600;

/// Scans every block once.
pub fn scan(manuscript: &Manuscript) -> Scan {
    let mut scan = Scan::default();
    for (number, block) in manuscript.blocks.iter().enumerate() {
        scan.block_sentences.push(scan.sentences.len() as u32);
        match &block.kind {
            BlockKind::Table(grid) => {
                let mut scanner = Scanner::new(block, false);
                for cell in &grid.cells {
                    let first = scan.tokens.len();
                    scanner.run(cell.start as usize, cell.end as usize, &mut scan.tokens);
                    scan.tokens.truncate(first + LONGEST);
                    scan.sentences.push(Sentence {
                        block: number as u32,
                        first: first as u32,
                        last: scan.tokens.len() as u32,
                    });
                }
            }
            _ => {
                let first = scan.tokens.len();
                Scanner::new(block, has_decimal_commas(&block.text)).run(0, block.text.len(), &mut scan.tokens);
                split_sentences(block, number as u32, first, &mut scan);
            }
        }
    }
    scan.block_sentences.push(scan.sentences.len() as u32);
    // Tokens are most of what an audit holds.
    scan.tokens.shrink_to_fit();
    scan.sentences.shrink_to_fit();
    scan
}

/// `0,05` in a text without `0.05`: commas are decimal marks there.
fn has_decimal_commas(text: &str) -> bool {
    let bytes = text.as_bytes();
    let (mut commas, mut points) = (0, 0);
    for w in bytes.windows(3) {
        if w[0].is_ascii_digit() && w[2].is_ascii_digit() {
            commas += u32::from(w[0] == b'0' && w[1] == b',');
            points += u32::from(w[1] == b'.');
        }
    }
    commas > 0 && points < commas
}

struct Scanner<'a> {
    text: &'a str,
    /// Marks that change how text is read, in order of their start.
    marks: Vec<(usize, usize, MarkKind)>,
    next_mark: usize,
    decimal_commas: bool,
}

impl<'a> Scanner<'a> {
    fn new(block: &'a Block, decimal_commas: bool) -> Scanner<'a> {
        let mut marks: Vec<_> = block
            .marks
            .iter()
            .filter(|m| {
                use MarkKind::*;
                matches!(m.kind, Superscript | Subscript | Code | Math | Reference)
            })
            .map(|m| (m.start as usize, m.end as usize, m.kind))
            .collect();
        marks.sort_unstable_by_key(|m| m.0);
        Scanner { text: &block.text, marks, next_mark: 0, decimal_commas }
    }

    /// The mark at an offset, if any, and where the current stretch of equal marking ends.
    fn mark_at(&mut self, offset: usize) -> (Option<MarkKind>, usize) {
        while self.marks.get(self.next_mark).is_some_and(|m| m.1 <= offset) {
            self.next_mark += 1;
        }
        match self.marks.get(self.next_mark) {
            Some(&(start, end, kind)) if start <= offset => (Some(kind), end),
            Some(&(start, ..)) => (None, start),
            None => (None, usize::MAX),
        }
    }

    fn run(&mut self, start: usize, end: usize, tokens: &mut Vec<Token>) {
        let bytes = self.text.as_bytes();
        let mut at = start;
        let mut spaced = true;
        while at < end {
            let (mark, limit) = self.mark_at(at);
            let limit = limit.min(end);
            let style = match mark {
                Some(MarkKind::Superscript) => Style::Superscript,
                Some(MarkKind::Subscript) => Style::Subscript,
                Some(_) => {
                    // Code, math and references hold no figures of the results.
                    at = limit;
                    spaced = true;
                    continue;
                }
                None => Style::Plain,
            };
            let b = bytes[at];
            let from = at;
            let point = b == b'.' && at + 1 < limit && bytes[at + 1].is_ascii_digit() && self.opens_decimal(at);
            let kind = if b.is_ascii_digit() || point {
                let (kind, next) = self.number(at, limit);
                at = next;
                kind
            } else if b.is_ascii_alphabetic() {
                at = self.word_end(at, limit);
                TokenKind::Word
            } else if b < 0x80 {
                at += 1;
                if b.is_ascii_whitespace() || b.is_ascii_control() {
                    spaced = true;
                    continue;
                }
                // `+/-` and `+/−` are `±`.
                if b == b'+' && bytes[at..limit].starts_with(b"/") {
                    let rest = &self.text[at + 1..limit];
                    match rest.chars().next() {
                        Some(c) if is_dash(c) => {
                            at += 1 + c.len_utf8();
                            TokenKind::Sign('±')
                        }
                        _ => TokenKind::Sign('+'),
                    }
                } else {
                    TokenKind::Sign(b as char)
                }
            } else {
                let c = self.text[at..].chars().next().unwrap_or(' ');
                let next = at + c.len_utf8();
                if is_space(c) {
                    at = next;
                    spaced = true;
                    continue;
                }
                if c == '\u{AD}' || c == '\u{200D}' {
                    at = next;
                    continue;
                }
                if is_point(c)
                    && bytes.get(next).is_some_and(u8::is_ascii_digit)
                    && next < limit
                    && self.opens_decimal(at)
                {
                    let (kind, next) = self.number(at, limit);
                    at = next;
                    kind
                } else if let Some((superscript, style_digit)) = raised(c) {
                    // A run of Unicode raised or lowered characters.
                    let style = if superscript { Style::Superscript } else { Style::Subscript };
                    at = next;
                    if style_digit.is_ascii_digit() {
                        let mut digits = u64::from(style_digit as u8 - b'0');
                        while let Some(c) = self.text[at..limit].chars().next() {
                            match raised(c) {
                                Some((s, d)) if s == superscript && d.is_ascii_digit() && digits < 1_000_000 => {
                                    digits = digits * 10 + u64::from(d as u8 - b'0');
                                    at += c.len_utf8();
                                }
                                _ => break,
                            }
                        }
                        push(
                            tokens,
                            from,
                            at,
                            TokenKind::Number(Printed::whole(digits)),
                            style,
                            &mut spaced,
                            self.text,
                        );
                    } else {
                        push(tokens, from, at, TokenKind::Sign(style_digit), style, &mut spaced, self.text);
                    }
                    continue;
                } else if c.is_alphabetic() {
                    at = self.word_end(at, limit);
                    TokenKind::Word
                } else {
                    at = next;
                    TokenKind::Sign(level(c))
                }
            };
            push(tokens, from, at, kind, style, &mut spaced, self.text);
        }
    }

    /// A point opens a decimal unless a digit or letter stands right before it.
    fn opens_decimal(&self, at: usize) -> bool {
        !self.text[..at].chars().next_back().is_some_and(|c| c.is_alphanumeric())
    }

    fn word_end(&self, start: usize, limit: usize) -> usize {
        let bytes = self.text.as_bytes();
        // `p's`, `F’s`: the plural of a symbol is the symbol.
        if bytes[start].is_ascii_alphabetic() && is_plural_of_a_symbol(&self.text[start + 1..limit]) {
            return start + 1;
        }
        let mut at = start;
        while at < limit {
            let b = bytes[at];
            let apostrophe = b == b'\'' && at + 1 < limit && bytes[at + 1].is_ascii_alphabetic();
            if b.is_ascii_alphanumeric() || apostrophe {
                at += 1;
            } else if b >= 0x80 {
                let Some(c) = self.text[at..].chars().next() else { break };
                let next = at + c.len_utf8();
                let inner = c == '\u{2019}' && self.text[next..limit].chars().next().is_some_and(char::is_alphabetic);
                if (c.is_alphabetic() && raised(c).is_none()) || inner || c == '\u{AD}' {
                    at = next;
                } else {
                    break;
                }
            } else {
                break;
            }
        }
        at
    }

    /// A number starting at a digit or a decimal mark.
    fn number(&self, start: usize, limit: usize) -> (TokenKind, usize) {
        let bytes = self.text.as_bytes();
        let digit_at = |i: usize| i < limit && bytes[i].is_ascii_digit();
        let run = |mut i: usize| {
            while digit_at(i) {
                i += 1;
            }
            i
        };
        let mut digits = 0u64;
        let mut count = 0usize;
        let add = |range: std::ops::Range<usize>, digits: &mut u64, count: &mut usize| {
            for &b in &bytes[range] {
                *count += 1;
                if *count <= 18 {
                    *digits = *digits * 10 + u64::from(b - b'0');
                }
            }
        };
        let mut at = run(start);
        add(start..at, &mut digits, &mut count);
        let whole = at - start;
        // Thousands: 1–3 digits, then groups of three after a comma or a narrow space.
        if (1..=3).contains(&whole) && bytes[start] != b'0' {
            while let Some(c) = self.text[at..limit].chars().next() {
                let group = at + c.len_utf8();
                let separates = match c {
                    ',' => !self.decimal_commas,
                    '\u{2009}' | '\u{202F}' | '\'' | '\u{2019}' => true,
                    _ => false,
                };
                if separates && run(group) == group + 3 {
                    add(group..group + 3, &mut digits, &mut count);
                    at = group + 3;
                } else {
                    break;
                }
            }
        }
        let mut places = 0usize;
        if let Some(c) = self.text[at..limit].chars().next() {
            let next = at + c.len_utf8();
            let comma = c == ',' && (self.decimal_commas || (whole == 1 && bytes[start] == b'0'));
            if (is_point(c) || comma) && digit_at(next) {
                let stop = run(next);
                add(next..stop, &mut digits, &mut count);
                places = stop - next;
                at = stop;
                // `1.2.3` is a version or a section, no number.
                if bytes.get(at) == Some(&b'.') && digit_at(at + 1) && c == '.' {
                    while digit_at(at) || (at < limit && bytes[at] == b'.' && digit_at(at + 1)) {
                        at += 1;
                    }
                    return (TokenKind::Word, at);
                }
            }
        }
        if count > 18 {
            return (TokenKind::Word, at);
        }
        let mut exponent = 0i16;
        // 1.2e-5, 3E−04
        if at < limit && matches!(bytes[at], b'e' | b'E') {
            let rest = &self.text[at + 1..limit];
            let (negative, skip) = match rest.chars().next() {
                Some(c) if is_dash(c) => (true, c.len_utf8()),
                Some('+') => (false, 1),
                _ => (false, 0),
            };
            let first = at + 1 + skip;
            let stop = run(first);
            let follows_word = self.text[stop..limit].chars().next().is_some_and(char::is_alphabetic);
            if stop > first && stop - first <= 3 && !follows_word {
                let size: i16 = self.text[first..stop].parse().unwrap_or(0);
                exponent = if negative { -size } else { size };
                at = stop;
            }
        }
        (TokenKind::Number(Printed { negative: false, digits, places: places as u8, exponent }), at)
    }
}

fn push(
    tokens: &mut Vec<Token>,
    start: usize,
    end: usize,
    kind: TokenKind,
    style: Style,
    spaced: &mut bool,
    text: &str,
) {
    let classes = if kind == TokenKind::Word { lexicon::classes(&text[start..end]) } else { lexicon::Classes::NONE };
    tokens.push(Token { start: start as u32, end: end as u32, kind, style, spaced: *spaced, classes });
    *spaced = false;
}

/// White space of every width, and the zero-width characters that stand in its place.
pub fn is_space(c: char) -> bool {
    c.is_whitespace() || matches!(c, '\u{200B}' | '\u{FEFF}' | '\u{2060}' | '\u{180E}' | '\u{200A}')
}

/// Hyphens, dashes and minus signs.
pub fn is_dash(c: char) -> bool {
    matches!(
        c,
        '-' | '\u{2010}'..='\u{2015}' | '\u{2212}' | '\u{FE63}' | '\u{FF0D}' | '\u{2796}' | '\u{F02D}' | '\u{00AF}'
    )
}

/// Decimal marks other than the comma.
fn is_point(c: char) -> bool {
    matches!(c, '.' | '\u{B7}' | '\u{2219}' | '\u{22C5}' | '\u{2024}' | '\u{2022}' | '\u{FF0E}')
}

/// The plain sign of a raised or lowered Unicode character; `true` for raised.
fn raised(c: char) -> Option<(bool, char)> {
    Some(match c {
        '\u{B9}' => (true, '1'),
        '\u{B2}' => (true, '2'),
        '\u{B3}' => (true, '3'),
        '\u{2070}' => (true, '0'),
        '\u{2074}'..='\u{2079}' => (true, (b'0' + (c as u32 - 0x2070) as u8) as char),
        '\u{207A}' => (true, '+'),
        '\u{207B}' => (true, '-'),
        '\u{2080}'..='\u{2089}' => (false, (b'0' + (c as u32 - 0x2080) as u8) as char),
        '\u{208B}' => (false, '-'),
        _ => return None,
    })
}

/// One sign for all its typographic variants.
fn level(c: char) -> char {
    match c {
        _ if is_dash(c) => '-',
        '\u{2264}' | '\u{2A7D}' | '\u{2266}' => '≤',
        '\u{2265}' | '\u{2A7E}' | '\u{2267}' => '≥',
        '\u{2039}' | '\u{FF1C}' | '\u{3008}' | '\u{27E8}' | '\u{2329}' | '\u{FE64}' | '\u{F03C}' => '<',
        '\u{203A}' | '\u{FF1E}' | '\u{3009}' | '\u{27E9}' | '\u{232A}' | '\u{FE65}' | '\u{F03E}' => '>',
        '\u{FF1D}' | '\u{FE66}' | '\u{A78A}' | '\u{2550}' => '=',
        '\u{2248}' | '\u{223C}' | '\u{2245}' | '\u{FF5E}' | '\u{2243}' | '\u{2053}' => '~',
        '\u{FF05}' | '\u{FE6A}' | '\u{66A}' => '%',
        '\u{FF08}' => '(',
        '\u{FF09}' => ')',
        '\u{FF0C}' | '\u{3001}' => ',',
        '\u{FF1A}' | '\u{2236}' => ':',
        '\u{FF1B}' => ';',
        '\u{FF0B}' => '+',
        '\u{2044}' | '\u{2215}' | '\u{FF0F}' => '/',
        '\u{F0B1}' | '\u{2213}' => '±',
        '\u{2715}' | '\u{2A2F}' | '\u{2573}' => '×',
        '\u{22C5}' | '\u{2219}' => '·',
        '\u{2032}' | '\u{2019}' | '\u{2018}' => '\'',
        c => c,
    }
}

/// Words after which a full stop ends no sentence.
const ABBREVIATIONS: &[&str] = &[
    "vs", "al", "fig", "figs", "approx", "ca", "dr", "st", "resp", "eg", "ie", "e", "i", "ref", "refs", "eq", "cf",
    "inc", "ltd", "co", "mr", "mrs", "prof", "ver", "vol", "etc", "tab", "suppl", "spp", "sp", "subsp", "var", "viz",
    "max", "min", "diff", "corp", "univ", "dept", "jan", "feb", "aug", "sept", "oct", "nov", "dec", "no", "nos", "p",
    "pp", "s", "d", "n", "bros", "incl", "excl", "adj",
];

/// Appends the sentence of tokens `first..last`, an endless one in parts, cut behind commas where there are any.
fn push_sentence(block: u32, mut first: usize, last: usize, scan: &mut Scan) {
    while last - first > LONGEST {
        let tokens = &scan.tokens;
        let part = (first + LONGEST / 2..first + LONGEST).rev();
        let comma = |k: &usize| matches!(tokens[k - 1].kind, TokenKind::Sign(',' | ';')) && tokens[*k].spaced;
        let cut = part.clone().find(comma).or_else(|| part.clone().find(|&k| tokens[k].spaced));
        let cut = cut.unwrap_or(first + LONGEST);
        scan.sentences.push(Sentence { block, first: first as u32, last: cut as u32 });
        first = cut;
    }
    scan.sentences.push(Sentence { block, first: first as u32, last: last as u32 });
}

/// Ends a sentence after `.`, `!` or `?` (with closing brackets, quotes and raised reference marks) before a space and
/// a capital, a digit or an opening bracket.
fn split_sentences(block: &Block, number: u32, first: usize, scan: &mut Scan) {
    let last = scan.tokens.len();
    let mut start = first;
    let mut i = first;
    while i < last {
        let tokens = &scan.tokens;
        let t = &tokens[i];
        if !matches!(t.kind, TokenKind::Sign('.' | '!' | '?')) || t.style != Style::Plain {
            i += 1;
            continue;
        }
        let mut next = i + 1;
        while next < last
            && !tokens[next].spaced
            && (matches!(tokens[next].kind, TokenKind::Sign(')' | ']' | '"' | '”' | '\'' | '»'))
                || tokens[next].style == Style::Superscript)
        {
            next += 1;
        }
        let opens = next < last && tokens[next].spaced && {
            let t = &tokens[next];
            match t.kind {
                TokenKind::Word => {
                    block.text[t.start as usize..].chars().next().is_some_and(|c| !c.is_lowercase() || next > i + 1)
                }
                TokenKind::Number(_) => true,
                TokenKind::Sign(c) => matches!(c, '(' | '[' | '"' | '“' | '‘' | '\'' | '-' | '«' | '*'),
            }
        };
        let abbreviated = i > start && tokens[i].is_sign('.') && {
            let before = &tokens[i - 1];
            let word = &block.text[before.start as usize..before.end as usize];
            let capital = word.chars().count() == 1 && word.chars().all(char::is_uppercase);
            // `n.s.` and `s.d.` end sentences as often as not; `P.` and initials do not.
            let inner = i >= 2 && tokens[i - 2].is_sign('.') && !before.spaced && before.is_word();
            // `i.e. 5.2` and `e.g. 5.2` go on.
            let that_is = inner && matches!(word, "e" | "g") && i >= 3 && {
                let first = &tokens[i - 3];
                matches!(&block.text[first.start as usize..first.end as usize], "i" | "e" | "I" | "E")
            };
            that_is
                || before.is_word()
                    && !inner
                    && (capital && before.spaced && next < last && tokens[next].is_word()
                        || ABBREVIATIONS.iter().any(|a| a.eq_ignore_ascii_case(word)))
        };
        if opens && !abbreviated {
            push_sentence(number, start, next, scan);
            start = next;
        }
        i = next;
    }
    if start < last {
        push_sentence(number, start, last, scan);
    }
}

/// A sentence (or a table cell) as recognisers see it.
#[derive(Clone, Copy)]
pub struct SentenceView<'a> {
    /// The whole block's text; token offsets refer to it.
    pub text: &'a str,
    pub tokens: &'a [Token],
    pub block: u32,
    /// Number of the sentence in the scan.
    pub id: u32,
}

/// Whether text goes on with an apostrophe, an s and no further letter.
fn is_plural_of_a_symbol(rest: &str) -> bool {
    let rest = rest.strip_prefix('\'').or_else(|| rest.strip_prefix('\u{2019}'));
    let rest = rest.and_then(|rest| rest.strip_prefix('s'));
    rest.is_some_and(|rest| !rest.starts_with(char::is_alphabetic))
}

impl<'a> SentenceView<'a> {
    pub fn len(&self) -> usize {
        self.tokens.len()
    }

    pub fn is_empty(&self) -> bool {
        self.tokens.is_empty()
    }

    pub fn get(&self, i: usize) -> Option<&'a Token> {
        self.tokens.get(i)
    }

    /// The text of one token; empty past the end.
    pub fn word(&self, i: usize) -> &'a str {
        self.tokens.get(i).map_or("", |t| &self.text[t.start as usize..t.end as usize])
    }

    /// Whether token `i` is this word, ASCII case ignored.
    pub fn eq(&self, i: usize, word: &str) -> bool {
        self.word(i).eq_ignore_ascii_case(word)
    }

    pub fn any(&self, i: usize, words: &[&str]) -> bool {
        let w = self.word(i).as_bytes();
        let Some(first) = w.first().map(|b| b | 0x20) else { return false };
        // Most words differ in length or first letter, which is cheaper to see.
        words
            .iter()
            .map(|x| x.as_bytes())
            .any(|x| x.len() == w.len() && x.first().is_some_and(|b| b | 0x20 == first) && x.eq_ignore_ascii_case(w))
    }

    /// Whether the tokens from `i` on are these words, case ignored.
    pub fn phrase(&self, i: usize, words: &[&str]) -> bool {
        words.iter().enumerate().all(|(k, w)| self.eq(i + k, w))
    }

    pub fn sign(&self, i: usize, sign: char) -> bool {
        self.tokens.get(i).is_some_and(|t| t.is_sign(sign))
    }

    pub fn signs(&self, i: usize, signs: &[char]) -> bool {
        matches!(self.tokens.get(i).map(|t| t.kind), Some(TokenKind::Sign(c)) if signs.contains(&c))
    }

    pub fn is(&self, i: usize, class: lexicon::Classes) -> bool {
        self.tokens.get(i).is_some_and(|t| t.is(class))
    }

    pub fn number(&self, i: usize) -> Option<Printed> {
        self.tokens.get(i).and_then(Token::number)
    }

    pub fn spaced(&self, i: usize) -> bool {
        self.tokens.get(i).is_none_or(|t| t.spaced)
    }

    pub fn style(&self, i: usize) -> Style {
        self.tokens.get(i).map_or(Style::Plain, |t| t.style)
    }

    /// A number with an optional sign in front (also set apart: `− 1.4`); gives the token after it.
    pub fn signed(&self, i: usize) -> Option<(Printed, usize)> {
        if let Some(p) = self.number(i) {
            return Some((p, i + 1));
        }
        let negative = match self.tokens.get(i)?.kind {
            TokenKind::Sign('-') => true,
            TokenKind::Sign('+') => false,
            _ => return None,
        };
        let p = self.number(i + 1)?;
        Some((if negative { p.negated() } else { p }, i + 2))
    }

    /// Bytes from the start of token `i` to the end of token `j`, both included.
    pub fn span(&self, i: usize, j: usize) -> Span {
        Span { block: self.block, start: self.tokens[i].start, end: self.tokens[j].end }
    }

    pub fn quote(&self, i: usize, j: usize) -> &'a str {
        &self.text[self.tokens[i].start as usize..self.tokens[j].end as usize]
    }

    /// The token that starts at or after a byte offset.
    pub fn token_at(&self, offset: u32) -> usize {
        self.tokens.partition_point(|t| t.start < offset)
    }
}
