//! Markdown: CommonMark with tables, footnotes, strikethrough, mathematics and YAML metadata, plus
//! what manuscripts do beyond it (see [`super::tidy`]).

use super::html;
use super::inline::{Draft, Inline};
use super::outline::{Outline, is_caption, is_caption_before_table};
use super::tidy::append;
use crate::manuscript::{Block, BlockKind, Cell, Grid, Mark, MarkKind, Section, SectionKind};
use pulldown_cmark::{Event, HeadingLevel, Options, Parser, Tag, TagEnd};
use std::borrow::Cow;
use std::ops::Range;

/// The sections and blocks of a Markdown text.
pub(super) fn blocks(source: &str) -> (Vec<Section>, Vec<Block>) {
    // Superscript and subscript are not asked of the parser: it does not see them inside words.
    let options =
        Options::ENABLE_TABLES | Options::ENABLE_FOOTNOTES | Options::ENABLE_STRIKETHROUGH | Options::ENABLE_MATH;
    let skipped = front_matter(source);
    let parsed = without_notes_as_links(source);
    let mut reader = Reader::new(source, &parsed);
    for (event, range) in Parser::new_ext(&parsed[skipped..], options).into_offset_iter() {
        reader.event(event, range.start + skipped..range.end + skipped);
    }
    reader.flush();
    (reader.outline.sections, reader.outline.blocks)
}

/// An inline element that is open.
struct Open {
    kind: Option<MarkKind>,
    /// Where its text starts.
    start: usize,
    /// Delimiters that are no markup after all: put back at the end too.
    literal: usize,
    /// The name of an HTML element; empty for Markdown's own.
    tag: &'static str,
}

/// What surrounds the text, outermost first.
enum Around {
    Item { marker: Option<usize> },
    Footnote,
}

#[derive(Default)]
struct Table {
    rows: Vec<Vec<(Inline, usize)>>,
    header_rows: u32,
    columns: usize,
}

struct Reader<'a> {
    source: &'a str,
    /// What the parser saw: the same length and, but for a few signs, the same bytes.
    parsed: &'a str,
    outline: Outline,
    /// The text of the block or cell that is being read.
    inline: Inline,
    open: Vec<Open>,
    around: Vec<Around>,
    heading: Option<u8>,
    table: Option<Table>,
    in_code: bool,
    /// Where the last text ended in the source.
    last: usize,
    /// Images whose alternative text is being skipped.
    images: usize,
    html: Option<Range<usize>>,
    /// The block is no list item but the legend of a mark in a table.
    legend: bool,
}

impl<'a> Reader<'a> {
    fn new(source: &'a str, parsed: &'a str) -> Reader<'a> {
        Reader {
            source,
            parsed,
            outline: Outline::new(),
            inline: Inline::default(),
            open: Vec::new(),
            around: Vec::new(),
            heading: None,
            table: None,
            in_code: false,
            last: 0,
            images: 0,
            html: None,
            legend: false,
        }
    }

    fn event(&mut self, event: Event<'a>, range: Range<usize>) {
        let range = self.valid(range);
        match event {
            Event::Start(tag) => self.start(tag, range),
            Event::End(tag) => self.end(tag, range),
            _ if self.images > 0 => {}
            Event::Text(text) => self.text(&text, range),
            Event::Code(code) => self.verbatim(&code, range, MarkKind::Code),
            Event::InlineMath(math) | Event::DisplayMath(math) => {
                if is_money(self.source, &math, &range) {
                    self.begin();
                    self.inline.push_source(self.source, range.clone(), false);
                    self.last = range.end;
                } else {
                    self.verbatim(&math, range, MarkKind::Math);
                }
            }
            Event::InlineHtml(html) => self.inline_html(&html, range),
            Event::Html(_) => {}
            Event::SoftBreak | Event::HardBreak => {
                self.inline.push_break(range.clone());
                self.last = range.end;
            }
            Event::FootnoteReference(_) => self.last = range.end,
            Event::Rule => self.flush(),
            Event::TaskListMarker(_) => {}
        }
    }

    /// A range that can be sliced, whatever the parser says.
    fn valid(&self, range: Range<usize>) -> Range<usize> {
        let start = self.source.floor_char_boundary(range.start.min(self.source.len()));
        let end = self.source.floor_char_boundary(range.end.min(self.source.len()));
        start..end.max(start)
    }

    fn start(&mut self, tag: Tag<'a>, range: Range<usize>) {
        match tag {
            Tag::Paragraph | Tag::BlockQuote(_) | Tag::List(_) => self.flush(),
            Tag::Heading { level, .. } => {
                self.flush();
                self.heading = Some(depth(level));
            }
            Tag::Item => {
                self.flush();
                let star = self.source[range.start..].starts_with('*');
                self.around.push(Around::Item { marker: star.then_some(range.start) });
            }
            Tag::FootnoteDefinition(_) => {
                self.flush();
                self.around.push(Around::Footnote);
            }
            Tag::CodeBlock(_) => {
                self.flush();
                self.in_code = true;
                self.push_open(Some(MarkKind::Code), 0, "");
            }
            Tag::HtmlBlock => {
                self.flush();
                self.html = Some(range);
            }
            Tag::Table(alignments) => {
                self.flush();
                self.table = Some(Table { columns: alignments.len(), ..Table::default() });
            }
            Tag::TableHead | Tag::TableRow => {
                if let Some(table) = &mut self.table {
                    table.rows.push(Vec::new());
                }
            }
            Tag::TableCell => self.last = range.start,
            Tag::Emphasis => self.start_emphasis(range, 1, MarkKind::Emphasis),
            Tag::Strong => self.start_emphasis(range, 2, MarkKind::Strong),
            Tag::Strikethrough => {
                // One tilde on each side is a subscript, which is read later.
                let single = !self.source[range.start..].starts_with("~~");
                self.begin();
                if single {
                    self.literal(range.start..range.start + 1);
                }
                self.push_open(None, usize::from(single), "");
                self.last = range.start + if single { 1 } else { 2 };
            }
            Tag::Link { .. } => {
                self.begin();
                self.push_open(Some(MarkKind::Link), 0, "");
            }
            Tag::Image { .. } => self.images += 1,
            Tag::Superscript | Tag::Subscript => self.push_open(None, 0, ""),
            Tag::MetadataBlock(_) | Tag::DefinitionList | Tag::DefinitionListTitle | Tag::DefinitionListDefinition => {
                self.flush()
            }
        }
    }

    fn end(&mut self, tag: TagEnd, range: Range<usize>) {
        match tag {
            TagEnd::Paragraph | TagEnd::Heading(_) | TagEnd::BlockQuote(_) | TagEnd::List(_) => self.flush(),
            TagEnd::Item | TagEnd::FootnoteDefinition => {
                self.flush();
                self.around.pop();
            }
            TagEnd::CodeBlock => {
                self.close_tags();
                self.in_code = false;
                self.flush();
            }
            TagEnd::HtmlBlock => self.html_block(),
            TagEnd::TableCell => {
                self.close_tags();
                let cell = std::mem::take(&mut self.inline);
                if let Some(row) = self.table.as_mut().and_then(|t| t.rows.last_mut()) {
                    row.push((cell, range.end));
                }
            }
            TagEnd::TableHead => {
                if let Some(table) = &mut self.table {
                    table.header_rows = table.rows.len() as u32;
                }
                self.surplus_cells(range.start);
            }
            TagEnd::TableRow => self.surplus_cells(range.start),
            TagEnd::Table => self.end_table(),
            TagEnd::Emphasis | TagEnd::Strong | TagEnd::Strikethrough | TagEnd::Link => self.end_inline(range),
            TagEnd::Superscript | TagEnd::Subscript => self.end_inline(range),
            TagEnd::Image => {
                self.images = self.images.saturating_sub(1);
                self.last = range.end;
            }
            TagEnd::MetadataBlock(_)
            | TagEnd::DefinitionList
            | TagEnd::DefinitionListTitle
            | TagEnd::DefinitionListDefinition => self.flush(),
        }
    }

    /// Before the first text of a block: the star of a legend that the parser took for a list's.
    fn begin(&mut self) {
        if !self.inline.text.is_empty() || self.table.is_some() || self.heading.is_some() {
            return;
        }
        let Some(Around::Item { marker }) = self.around.last_mut() else { return };
        let Some(at) = marker.take() else { return };
        let rest = &self.source[at + 1..];
        let gap = rest.len() - rest.trim_start_matches(' ').len();
        let after_table = matches!(self.outline.blocks.last(), Some(b) if matches!(b.kind, BlockKind::Table(_)));
        if after_table || is_legend(&rest[gap..]) {
            self.legend = true;
            self.inline.push_source(self.source, at..at + 1 + gap, true);
        }
    }

    fn text(&mut self, text: &str, range: Range<usize>) {
        self.begin();
        let escaped = !self.in_code
            && range.start > self.last
            && self.source.as_bytes()[range.start - 1] == b'\\'
            && text.starts_with(|c: char| c.is_ascii_punctuation());
        if self.parsed[range.clone()] != *text {
            let from = if escaped { range.start - 1 } else { range.start };
            self.inline.push_other(text, from..range.end);
        } else if escaped {
            self.inline.push_other(&text[..1], range.start - 1..range.start + 1);
            self.inline.push_source(self.source, range.start + 1..range.end, false);
        } else {
            self.inline.push_source(self.source, range.clone(), self.in_code);
        }
        self.last = range.end;
    }

    /// Code and mathematics: the text between the delimiters.
    fn verbatim(&mut self, text: &str, range: Range<usize>, kind: MarkKind) {
        self.begin();
        let start = self.inline.text.len();
        let slice = &self.source[range.clone()];
        let delimiters = (slice.len().saturating_sub(text.len())) / 2;
        let inner = slice.get(delimiters..delimiters + text.len());
        if inner == Some(text) {
            let from = range.start + delimiters;
            self.inline.push_source(self.source, from..from + text.len(), true);
        } else {
            self.inline.push_other(text, range.clone());
        }
        self.inline.mark(start, self.inline.text.len(), kind);
        self.last = range.end;
    }

    fn literal(&mut self, range: Range<usize>) {
        let range = self.valid(range);
        self.inline.push_source(self.source, range.clone(), false);
        self.last = range.end;
    }

    fn push_open(&mut self, kind: Option<MarkKind>, literal: usize, tag: &'static str) {
        self.open.push(Open { kind, start: self.inline.text.len(), literal, tag });
    }

    fn start_emphasis(&mut self, range: Range<usize>, length: usize, kind: MarkKind) {
        self.begin();
        if self.are_stars(&range, length) {
            self.literal(range.start..range.start + length);
            self.push_open(None, length, "");
        } else {
            self.push_open(Some(kind), 0, "");
            self.last = range.start + length;
        }
    }

    /// Significance stars that the parser paired: `12^*^ and 13^*^`, `12.1*b, 13.2*b`.
    fn are_stars(&self, range: &Range<usize>, length: usize) -> bool {
        let bytes = self.source.as_bytes();
        let before = range.start.checked_sub(1).map(|i| bytes[i]);
        let after = bytes.get(range.start + length).copied();
        let last = range.end.checked_sub(length + 1).map(|i| bytes[i]);
        let digit = |b: Option<u8>| b.is_some_and(|b| b.is_ascii_digit());
        bytes[range.start] == b'*' && ((before == Some(b'^') && after == Some(b'^')) || (digit(before) && digit(last)))
    }

    fn end_inline(&mut self, range: Range<usize>) {
        // HTML elements left open inside end here.
        while self.open.last().is_some_and(|o| !o.tag.is_empty()) {
            self.open.pop();
        }
        let Some(open) = self.open.pop() else { return };
        if open.literal > 0 {
            self.literal(range.end.saturating_sub(open.literal).max(range.start)..range.end);
        } else if let Some(kind) = open.kind {
            self.inline.mark(open.start, self.inline.text.len(), kind);
            let text = self.inline.text[open.start..].trim();
            if kind == MarkKind::Link && !text.is_empty() && text.bytes().all(|b| b.is_ascii_digit()) {
                self.inline.mark(open.start, self.inline.text.len(), MarkKind::Reference);
            }
        }
        self.last = range.end;
    }

    fn inline_html(&mut self, html: &str, range: Range<usize>) {
        self.begin();
        self.last = range.end;
        let inner = html.trim_start_matches('<');
        let closing = inner.starts_with('/');
        let name = inner.trim_start_matches('/');
        let name = &name[..name.find(|c: char| !c.is_ascii_alphanumeric()).unwrap_or(name.len())];
        let (tag, kind) = match name.to_ascii_lowercase().as_str() {
            "sup" => ("sup", MarkKind::Superscript),
            "sub" => ("sub", MarkKind::Subscript),
            "i" | "em" => ("i", MarkKind::Emphasis),
            "b" | "strong" => ("b", MarkKind::Strong),
            "br" => return self.inline.push_break(range),
            _ => return,
        };
        if !closing {
            self.push_open(Some(kind), 0, tag);
            return;
        }
        // Elements nest a few deep; looking no further keeps hostile text cheap.
        let from = self.open.len().saturating_sub(16);
        let found = self.open[from..].iter().rposition(|o| o.tag == tag || o.tag.is_empty());
        if let Some(i) = found.map(|i| from + i).filter(|&i| self.open[i].tag == tag) {
            let open = self.open.remove(i);
            self.inline.mark(open.start, self.inline.text.len(), kind);
        }
    }

    /// The text of an HTML block, without its tags.
    fn html_block(&mut self) {
        let Some(range) = self.html.take() else { return };
        for part in html::parts(self.source, range) {
            match part {
                html::Part::Text(range) => self.inline.push_source(self.source, range, false),
                html::Part::Entity(text, range) => self.inline.push_other(&text, range),
                html::Part::Space(range) => self.inline.push_break(range),
                html::Part::Tag(range) => self.inline_html(&self.source[range.clone()], range),
                html::Part::Break => self.flush(),
            }
        }
        self.flush();
    }

    fn close_tags(&mut self) {
        while let Some(open) = self.open.pop() {
            if let (Some(kind), "") = (open.kind, open.tag) {
                self.inline.mark(open.start, self.inline.text.len(), kind);
            }
        }
    }

    /// Ends the block that is being read.
    fn flush(&mut self) {
        self.close_tags();
        let heading = self.heading.take();
        let legend = std::mem::take(&mut self.legend);
        let inline = std::mem::take(&mut self.inline);
        if inline.is_blank() && heading.is_none() {
            return;
        }
        let mut draft = Draft::default();
        append(&mut draft, inline);
        let caption = is_caption(&draft.text);
        let heading = heading.or_else(|| strong_heading(&draft).filter(|_| self.around.is_empty()));
        let kind = match (heading, self.around.last()) {
            _ if caption => BlockKind::Caption,
            _ if legend => BlockKind::Paragraph,
            (Some(_), _) => BlockKind::Heading,
            (None, Some(Around::Item { .. })) => BlockKind::ListItem,
            (None, Some(Around::Footnote)) => BlockKind::Footnote,
            (None, None) => BlockKind::Paragraph,
        };
        self.outline.push(draft.finish(kind), heading.unwrap_or(0));
    }

    /// Cells beyond the header's columns, which the parser drops (GFM, section 4.10): kept, because
    /// a figure may stand in them.
    fn surplus_cells(&mut self, start: usize) {
        let source = self.source;
        let Some(row) = self.table.as_mut().and_then(|t| t.rows.last_mut()) else { return };
        let line = source[start..].find(['\n', '\r']).map_or(source.len(), |i| start + i);
        // The parser ends cells that are missing on the next line.
        for cell in row.iter_mut() {
            cell.1 = cell.1.min(line);
        }
        let Some(mut at) = row.last().map(|cell| cell.1) else { return };
        while let Some(gap) = source[at..line].find('|').filter(|&i| source[at..at + i].trim().is_empty()) {
            let start = at + gap + 1;
            if source[start..line].trim().is_empty() {
                break;
            }
            let end = end_of_cell(source, start, line);
            let cell = &source[start..end];
            let from = start + (cell.len() - cell.trim_start().len());
            let mut inline = Inline::default();
            inline.push_source(source, from..from + cell.trim().len(), false);
            row.push((inline, end));
            at = end;
        }
    }

    fn end_table(&mut self) {
        let Some(table) = self.table.take() else { return };
        let columns = table.rows.iter().map(Vec::len).max().unwrap_or(0).max(table.columns);
        let mut grid = Grid {
            rows: table.rows.len() as u32,
            columns: columns as u32,
            header_rows: table.header_rows,
            cells: Vec::with_capacity(table.rows.len() * columns),
        };
        let mut draft = Draft::default();
        for (row, cells) in (0u32..).zip(table.rows) {
            let mut at = cells.last().map_or(self.last, |c| c.1);
            let mut cells = cells.into_iter();
            for column in 0..columns {
                let start = draft.text.len() as u32;
                if let Some((inline, end)) = cells.next() {
                    append(&mut draft, inline);
                    at = end;
                }
                let end = draft.text.len() as u32;
                grid.cells.push(Cell { row, column: column as u32, row_span: 1, column_span: 1, start, end });
                draft.separator(if column + 1 == columns { '\n' } else { '\t' }, at);
            }
        }
        if let Some(before) = self.outline.blocks.last_mut()
            && before.kind == BlockKind::Paragraph
            && is_caption_before_table(&before.text)
        {
            before.kind = BlockKind::Caption;
        }
        self.outline.push(draft.finish(BlockKind::Table(grid)), 0);
    }
}

/// The length of YAML metadata at the head of the file. The parser would take any text between two
/// rules for metadata, also in the middle of a manuscript, so this is not asked of it.
fn front_matter(source: &str) -> usize {
    let mut lines = source.split_inclusive('\n');
    let mut at = match lines.next() {
        Some(first) if first.trim_end() == "---" => first.len(),
        _ => return 0,
    };
    for (i, line) in lines.enumerate() {
        let text = line.trim_end();
        at += line.len();
        if text == "---" || text == "..." {
            return at;
        }
        if i == 0 && !text.contains(':') && !text.starts_with('#') {
            return 0;
        }
    }
    0
}

fn depth(level: HeadingLevel) -> u8 {
    match level {
        HeadingLevel::H1 => 1,
        HeadingLevel::H2 => 2,
        HeadingLevel::H3 => 3,
        HeadingLevel::H4 => 4,
        HeadingLevel::H5 => 5,
        HeadingLevel::H6 => 6,
    }
}

/// The text with the colon masked in lines such as `[a]: P<0.05`, which the parser would take for
/// the address of a link and drop.
fn without_notes_as_links(source: &str) -> Cow<'_, str> {
    let mut masked: Option<Vec<u8>> = None;
    let mut at = 0;
    for line in source.split_inclusive('\n') {
        let rest = line.trim_start_matches([' ', '>', '\t']);
        let start = at + (line.len() - rest.len());
        at += line.len();
        let Some(label) = rest.strip_prefix('[').filter(|r| !r.starts_with('^')).and_then(|r| r.find("]:")) else {
            continue;
        };
        let address = rest[label + 3..].split_whitespace().next().unwrap_or("http://on.the.next.line");
        if !is_address(address) {
            masked.get_or_insert_with(|| source.as_bytes().to_vec())[start + label + 2] = b';';
        }
    }
    // One ASCII byte stands for another, so the copy is as valid as the original.
    masked.and_then(|m| String::from_utf8(m).ok()).map_or(Cow::Borrowed(source), Cow::Owned)
}

/// A link's address rather than words.
fn is_address(text: &str) -> bool {
    text.contains("://") || text.contains('@') || text.starts_with(['#', '/', '<']) || text.starts_with("www.")
}

/// `**Results**` alone in a paragraph is a heading, below all others.
fn strong_heading(draft: &Draft) -> Option<u8> {
    let title = draft.text.trim_end_matches([':', '.']);
    let strong = |m: &Mark| m.kind == MarkKind::Strong && m.start == 0 && m.end as usize >= title.len();
    (title.len() <= 60 && draft.marks.iter().any(strong) && SectionKind::of_title(title).is_some()).then_some(6)
}

/// Where the next `|` that is not escaped stands, or the end of the line.
fn end_of_cell(source: &str, start: usize, line: usize) -> usize {
    let mut escaped = false;
    for (i, b) in source.as_bytes()[start..line].iter().enumerate() {
        match b {
            b'|' if !escaped => return start + i,
            b'\\' => escaped = !escaped,
            _ => escaped = false,
        }
    }
    line
}

/// `* P < 0.05 versus placebo`, `* significantly different from …`: what a star under a table means.
fn is_legend(text: &str) -> bool {
    let text = text.trim_start_matches(['*', '_', ' ']);
    if text.starts_with("ignifican") || text.get(1..).is_some_and(|t| t.starts_with("ignifican")) {
        return true;
    }
    let Some(rest) = text.strip_prefix(['P', 'p']) else { return false };
    let rest = rest.trim_start_matches(['*', '_', ' ', '\u{a0}', '\u{2009}', '\u{200a}', '\u{202f}', '\\']);
    rest.starts_with(['<', '>', '=', '≤', '≥']) || rest.starts_with("&lt;")
}

/// `$1,100 … $` in running text: sums of money, not mathematics.
fn is_money(source: &str, math: &str, range: &Range<usize>) -> bool {
    let before = source[..range.start].chars().next_back();
    let after = source[range.end..].chars().next();
    math.starts_with(|c: char| c.is_ascii_digit())
        && !math.contains(['\\', '^', '_', '{'])
        && (after.is_some_and(|c| c.is_ascii_digit())
            || before.is_some_and(char::is_alphanumeric)
            || math.matches('(').count() != math.matches(')').count()
            || math.split(|c: char| !c.is_alphabetic()).any(|w| w.len() > 2))
}
