//! The article while it is read: elements to sections, blocks and marks.

use super::cite::cite;
use super::element::{Role, is_other_abstract, kind_of_type, role};
use super::entities::{Entities, Resolved, is_nothing};
use super::slips::Slips;
use super::table::{Built, Part, RawCell, Table};
use super::{Article, local, math};
use crate::intake::inline::{Draft, Inline};
use crate::intake::outline::Outline;
use crate::intake::tidy::append;
use crate::manuscript::{Block, BlockKind, Mark, MarkKind, SectionKind};
use quick_xml::events::attributes::Attributes;
use std::ops::Range;

/// Elements beyond this depth are read as if they were not there.
const DEEPEST: usize = 4096;
/// How far up an end tag looks for its start.
const FARTHEST: usize = 64;

/// A start tag.
pub(super) struct Tag<'a, 't> {
    pub name: &'a str,
    pub range: Range<usize>,
    pub attributes: &'t str,
}

impl Tag<'_, '_> {
    fn attribute(&self, name: &str) -> Option<String> {
        let mut attributes = Attributes::new(self.attributes, 0);
        let found = attributes.with_checks(false).flatten().find(|a| local(a.key.into_inner()) == name);
        found.map(|a| a.value.chars().take(64).collect())
    }

    fn span(&self, name: &str) -> usize {
        match self.attribute(name).and_then(|v| v.trim().parse::<usize>().ok()) {
            // All the rest, in HTML.
            Some(0) => 65_534,
            Some(n) => n.min(65_534),
            None => 1,
        }
    }
}

/// What the text at hand belongs to.
#[derive(Clone, Copy, PartialEq, Eq)]
enum Flow {
    Paragraph,
    Item,
    Caption,
    Note,
    Heading,
    Cell,
}

/// An open element.
struct Open<'a> {
    name: &'a str,
    role: Role,
    /// As it was before the element.
    quiet: bool,
    flow: Flow,
    section: u32,
    /// Where its text starts, and in which text.
    text: u64,
    start: usize,
    /// Elements in it so far.
    children: u32,
}

/// A formula that may come in several forms.
struct Formula {
    depth: usize,
    tex: Option<Range<usize>>,
    taken: bool,
}

pub(super) struct Reader<'a> {
    source: &'a str,
    outline: Outline,
    stack: Vec<Open<'a>>,
    /// Open elements that are too deep to stand on the stack.
    deeper: usize,
    inline: Inline,
    /// Number of the text at hand: a new one for every block.
    text: u64,
    texts: u64,
    flow: Flow,
    /// Text is not read here.
    quiet: bool,
    /// The depth of the element in which nothing is read.
    skipping: Option<usize>,
    /// A label was the last that was read.
    labelled: bool,
    /// Texts in which a float or note stands.
    suspended: Vec<(Inline, u64)>,
    /// Blocks that stand within such a text and follow it.
    held: Vec<Block>,
    table: Option<Table>,
    cell: Option<RawCell>,
    formula: Option<Formula>,
    /// The depth of the mathematics that is read, and whether a line can hold it.
    math: Option<(usize, bool)>,
    tex: Option<Range<usize>>,
    title: u32,
    back: bool,
    /// The float at hand: a picture in it, a table in it.
    pictured: bool,
    tabled: bool,
    slips: Slips<'a>,
}

impl<'a> Reader<'a> {
    pub fn new(source: &'a str) -> Reader<'a> {
        Reader {
            source,
            outline: Outline::new(),
            stack: Vec::new(),
            deeper: 0,
            inline: Inline::default(),
            text: 0,
            texts: 0,
            flow: Flow::Paragraph,
            quiet: true,
            skipping: None,
            labelled: false,
            suspended: Vec::new(),
            held: Vec::new(),
            table: None,
            cell: None,
            formula: None,
            math: None,
            tex: None,
            title: 0,
            back: false,
            pictured: false,
            tabled: false,
            slips: Slips::default(),
        }
    }

    pub fn damage(&mut self, at: usize) {
        self.slips.damage.get_or_insert(at);
    }

    // Text.

    /// Text as it stands in the source; white space becomes one space.
    pub fn text(&mut self, range: Range<usize>) {
        if let Some(tex) = &mut self.tex {
            *tex = if tex.start == tex.end { range } else { tex.start..range.end };
            return;
        }
        if self.is_quiet() {
            return;
        }
        let mut range = range;
        if self.math.is_some() {
            let slice = &self.source[range.clone()];
            let Some(top) = self.stack.last().filter(|o| math::is_token(o.name)) else { return };
            if top.name != "mtext" {
                let end = range.start + slice.trim_end().len();
                let start = end - slice.trim().len();
                range = start..end;
            }
        }
        let slice = &self.source[range.clone()];
        let mut from = range.start;
        let mut chars = slice.char_indices().peekable();
        while let Some((i, c)) = chars.next() {
            let at = range.start + i;
            if is_nothing(c) {
                self.inline.push_source(self.source, from..at, true);
                from = at + c.len_utf8();
            } else if is_space(c) {
                let mut end = at + 1;
                while chars.next_if(|&(_, c)| is_space(c)).is_some() {
                    end += 1;
                }
                let after_space =
                    if from < at { false } else { self.inline.text.is_empty() || self.inline.text.ends_with(' ') };
                if c == ' ' && end == at + 1 && !after_space {
                    continue;
                }
                self.inline.push_source(self.source, from..at, true);
                self.inline.push_break(at..end);
                from = end;
            }
        }
        self.inline.push_source(self.source, from..range.end, true);
        self.labelled &= slice.chars().all(is_space);
    }

    /// `&name;`
    pub fn reference(&mut self, name: &'a str, range: Range<usize>, entities: &mut Entities<'a>) {
        if let Some(tex) = &mut self.tex {
            *tex = if tex.start == tex.end { range } else { tex.start..range.end };
            return;
        }
        if self.is_quiet() || (self.math.is_some() && !self.stack.last().is_some_and(|o| math::is_token(o.name))) {
            return;
        }
        match entities.resolve(name) {
            Resolved::Text(text) => {
                let text: String = text.chars().filter(|&c| !is_nothing(c)).collect();
                if text.chars().all(is_space) {
                    if !text.is_empty() {
                        self.inline.push_break(range);
                    }
                } else {
                    self.inline.push_other(&text, range);
                    self.labelled = false;
                }
                return;
            }
            Resolved::Unknown if self.slips.unknown.len() < 3 && !self.slips.unknown.contains(&name) => {
                self.slips.unknown.push(name)
            }
            Resolved::Unknown => {}
            Resolved::TooLarge => self.slips.too_large = true,
        }
        self.text(range);
    }

    fn is_quiet(&self) -> bool {
        self.quiet || self.skipping.is_some()
    }

    // Elements.

    pub fn start(&mut self, tag: &Tag<'a, '_>) {
        if self.stack.len() >= DEEPEST {
            self.deeper += 1;
            self.slips.too_deep = true;
            return;
        }
        let (parent, index) = match self.stack.last_mut() {
            Some(o) => {
                o.children += 1;
                (o.name, o.children - 1)
            }
            None => ("", 0),
        };
        let mut open = Open {
            name: tag.name,
            role: role(tag.name, parent),
            quiet: self.quiet,
            flow: self.flow,
            section: self.outline.current(),
            text: self.text,
            start: self.inline.text.len(),
            children: 0,
        };
        if self.skipping.is_none() {
            open.role = if self.math.is_some() {
                self.start_math(tag, open.role, parent, index)
            } else {
                self.start_element(tag, open.role, parent)
            };
            open.text = self.text;
            open.start = self.inline.text.len();
            if matches!(open.role, Role::Skipped | Role::Attached) {
                self.skipping = Some(self.stack.len());
            }
        }
        self.stack.push(open);
    }

    fn start_math(&mut self, tag: &Tag, role: Role, parent: &str, index: u32) -> Role {
        if let Some((_, complex)) = &mut self.math {
            *complex |= math::is_complex(tag.name);
        }
        match tag.name {
            "mspace" => self.inline.push_break(tag.range.clone()),
            _ if role == Role::Skipped => return Role::Skipped,
            _ => {}
        }
        math::script(parent, index).map_or(Role::Plain, Role::Mark)
    }

    /// What an element begins, and the role that it has here.
    fn start_element(&mut self, tag: &Tag, role: Role, parent: &str) -> Role {
        let at = tag.range.start;
        match role {
            Role::Plain if tag.name == "article" => {
                self.slips.articles += 1;
                // Of several articles the first is read.
                return if self.slips.articles > 1 { Role::Skipped } else { Role::Plain };
            }
            Role::Plain if tag.name == "xref" => {
                return match tag.attribute("ref-type").as_deref() {
                    Some("bibr") => Role::Citation,
                    Some("fn" | "table-fn") => Role::NoteMark,
                    _ => Role::Plain,
                };
            }
            Role::Plain | Role::Skipped | Role::Mark(_) | Role::Citation | Role::NoteMark => {}
            Role::Attached => self.slips.attached = true,
            Role::Body | Role::Back | Role::Floats => {
                self.flush();
                self.quiet = false;
                self.back = role == Role::Back;
                self.outline.go(self.title);
                if role != Role::Body {
                    let kind = (role == Role::Back).then_some(SectionKind::Back);
                    self.outline.enter(self.title, kind.or(Some(SectionKind::Unknown)), false);
                }
            }
            Role::Abstract => {
                if tag.attribute("abstract-type").is_some_and(|t| is_other_abstract(&t)) {
                    return Role::Skipped;
                }
                self.flush();
                self.quiet = false;
                self.outline.enter(self.title, Some(SectionKind::Abstract), true);
                self.outline.name("Abstract", None);
            }
            Role::Section => {
                self.flush();
                let kind = tag.attribute("sec-type").and_then(|t| kind_of_type(&t));
                let above = self.outline.current();
                self.outline.enter(above, self.allowed(kind, above), false);
            }
            Role::ArticleTitle => {
                if self.title > 0 || !self.outline.blocks.is_empty() {
                    return Role::Skipped;
                }
                self.quiet = false;
                self.flow = Flow::Heading;
                self.outline.enter(0, Some(SectionKind::Title), false);
                self.title = self.outline.current();
            }
            Role::Title => {
                let owner = super::element::role(parent, "");
                if matches!(owner, Role::Section | Role::Abstract) {
                    if std::mem::take(&mut self.labelled) {
                        self.inline.push_break(at..at);
                    } else {
                        self.flush();
                    }
                    self.flow = Flow::Heading;
                } else {
                    self.start_block(at);
                    return Role::Block;
                }
            }
            Role::Block => self.start_block(at),
            Role::Item => {
                self.start_block(at);
                if self.flow == Flow::Paragraph {
                    self.flow = Flow::Item;
                }
            }
            Role::Float if self.table.is_some() => {
                self.start_block(at);
                return Role::Block;
            }
            Role::Float => {
                self.suspend();
                self.flow = Flow::Caption;
                (self.pictured, self.tabled) = (false, false);
            }
            Role::Note => {
                if self.flow == Flow::Note && self.table.is_none() {
                    self.flush();
                }
                self.suspend();
                self.flow = Flow::Note;
            }
            Role::Notes => {
                self.flush();
                self.flow = Flow::Note;
            }
            Role::Label => {
                if parent == "disp-formula" || parent == "list" {
                    return Role::Skipped;
                }
            }
            Role::Table | Role::Part | Role::Row | Role::Cell => return self.start_table(tag, role),
            Role::Rule => {
                if let Some(cell) = &mut self.cell {
                    cell.ruled = true;
                }
            }
            Role::Break => {
                if !self.is_quiet() {
                    self.inline.push_break(tag.range.clone());
                }
            }
            Role::Formula => {
                if tag.name == "disp-formula" && !self.is_quiet() {
                    self.inline.push_break(at..at);
                }
                if self.formula.is_none() {
                    self.formula = Some(Formula { depth: self.stack.len(), tex: None, taken: false });
                } else {
                    return Role::Plain;
                }
            }
            Role::Tex => self.tex = Some(at..at),
            Role::Math => {
                if let Some(formula) = &mut self.formula
                    && std::mem::replace(&mut formula.taken, true)
                {
                    return Role::Skipped;
                }
                self.math = Some((self.stack.len(), false));
            }
            Role::Picture => {
                self.pictured = true;
                return Role::Skipped;
            }
        }
        role
    }

    fn start_table(&mut self, tag: &Tag, role: Role) -> Role {
        let at = tag.range.start;
        if self.table.is_some() == (role == Role::Table) || (self.cell.is_some() && role != Role::Table) {
            // A table in a table's cell, or parts of a table without one.
            if self.cell.is_some() || self.table.is_none() {
                self.start_block(at);
            }
            return Role::Block;
        }
        match role {
            Role::Table => {
                self.flush();
                self.suspend();
                self.table = Some(Table::new());
                self.tabled = true;
                self.quiet = true;
            }
            Role::Part => {
                if let Some(table) = &mut self.table {
                    table.enter(tag.name);
                }
            }
            Role::Row => {
                if let Some(table) = &mut self.table {
                    table.row();
                }
            }
            _ => {
                self.quiet = false;
                self.flow = Flow::Cell;
                self.fresh();
                self.cell = Some(RawCell {
                    inline: Inline::default(),
                    header: tag.name == "th",
                    ruled: false,
                    row_span: tag.span("rowspan"),
                    column_span: tag.span("colspan"),
                    end: at,
                });
            }
        }
        role
    }

    pub fn end(&mut self, name: &str, range: Range<usize>) {
        if self.deeper > 0 {
            self.deeper -= 1;
            return;
        }
        let from = self.stack.len().saturating_sub(FARTHEST);
        let Some(found) = self.stack[from..].iter().rposition(|o| o.name == name) else {
            return self.damage(range.start);
        };
        if from + found + 1 < self.stack.len() {
            self.damage(range.start);
        }
        while self.stack.len() > from + found {
            self.close(range.clone());
        }
    }

    /// Ends the innermost element.
    fn close(&mut self, range: Range<usize>) {
        let Some(open) = self.stack.pop() else { return };
        let depth = self.stack.len();
        match self.skipping {
            Some(d) if d < depth => return,
            Some(_) => {
                self.skipping = None;
                return;
            }
            None => {}
        }
        let at = range.start;
        let end = self.inline.text.len();
        // The element's text, if no block ended within it.
        let own = if open.text == self.text { open.start.min(end)..end } else { end..end };
        match open.role {
            Role::Mark(kind) => self.inline.mark(own.start, own.end, kind),
            Role::Citation => self.inline.mark(own.start, own.end, MarkKind::Reference),
            Role::NoteMark => self.raise(own),
            Role::Math => {
                let complex = self.math.take().is_some_and(|m| m.1);
                if complex {
                    self.as_math(own);
                }
            }
            Role::Tex => self.end_tex(),
            Role::Formula => {
                if let Some(Formula { tex: Some(tex), taken: false, .. }) = self.formula.take_if(|f| f.depth == depth) {
                    self.push_tex(tex);
                }
                if open.name == "disp-formula" && !self.is_quiet() {
                    self.inline.push_break(at..at);
                }
            }
            Role::Label => self.end_label(own, at),
            Role::Title | Role::ArticleTitle => self.end_title(),
            Role::Block | Role::Item => match self.flow {
                Flow::Cell => self.pause(at..at),
                Flow::Caption | Flow::Heading => {}
                Flow::Note if self.stack.last().is_some_and(|o| o.role == Role::Note) => {}
                _ => self.flush(),
            },
            Role::Float => {
                if self.pictured && !self.tabled && open.name == "table-wrap" {
                    self.slips.pictures += 1;
                }
                self.flush();
                self.resume();
            }
            Role::Note => {
                self.flush();
                self.resume();
            }
            Role::Table => self.end_table(),
            Role::Cell => {
                if let Some(mut cell) = self.cell.take() {
                    cell.inline = std::mem::take(&mut self.inline);
                    cell.end = at;
                    cite(&mut cell.inline);
                    self.fresh();
                    if let Some(table) = &mut self.table {
                        table.cell(cell);
                    }
                }
            }
            Role::Part => {
                if let Some(table) = &mut self.table {
                    table.part = Part::Body(u32::MAX);
                }
            }
            Role::Body | Role::Back | Role::Floats | Role::Abstract | Role::Section | Role::Notes => {
                self.flush();
                if open.role == Role::Back {
                    self.back = false;
                }
            }
            Role::Plain | Role::Skipped | Role::Attached | Role::Row | Role::Rule | Role::Break | Role::Picture => {}
        }
        self.quiet = open.quiet;
        self.flow = open.flow;
        if matches!(
            open.role,
            Role::Body | Role::Back | Role::Floats | Role::Abstract | Role::Section | Role::ArticleTitle
        ) {
            self.outline.go(open.section);
        }
    }

    // Blocks.

    fn start_block(&mut self, at: usize) {
        if self.is_quiet() {
            return;
        }
        match self.flow {
            Flow::Cell | Flow::Heading => self.pause(at..at),
            Flow::Caption => self.join(at),
            Flow::Note if self.stack.last().is_some_and(|o| o.role == Role::Note) => self.join(at),
            _ if std::mem::take(&mut self.labelled) => self.pause(at..at),
            _ => self.flush(),
        }
    }

    fn pause(&mut self, range: Range<usize>) {
        self.inline.push_break(range);
    }

    /// Between the parts of a caption: a stop, unless there is one.
    fn join(&mut self, at: usize) {
        let labelled = std::mem::take(&mut self.labelled);
        let text = self.inline.text.trim_end();
        if text.is_empty() {
            return;
        }
        if !labelled && text.ends_with(|c: char| c.is_alphanumeric() || matches!(c, ')' | ']' | '%' | '"' | '”')) {
            self.inline.push_other(".", at..at);
        }
        self.pause(at..at);
    }

    /// Another text begins.
    fn fresh(&mut self) {
        self.texts += 1;
        self.text = self.texts;
        self.labelled = false;
    }

    /// Puts the text at hand aside for a float or a note.
    fn suspend(&mut self) {
        let inline = std::mem::take(&mut self.inline);
        self.suspended.push((inline, self.text));
        self.fresh();
    }

    fn resume(&mut self) {
        if let Some((inline, text)) = self.suspended.pop() {
            (self.inline, self.text) = (inline, text);
        }
        self.release();
    }

    /// Ends the text at hand: it becomes a block.
    fn flush(&mut self) {
        let inline = std::mem::take(&mut self.inline);
        self.fresh();
        let kind = match self.flow {
            Flow::Paragraph | Flow::Cell => BlockKind::Paragraph,
            Flow::Item => BlockKind::ListItem,
            Flow::Caption => BlockKind::Caption,
            Flow::Note => BlockKind::Footnote,
            Flow::Heading => BlockKind::Heading,
        };
        self.push(inline, kind);
    }

    fn push(&mut self, mut inline: Inline, kind: BlockKind) {
        if inline.is_blank() {
            return;
        }
        cite(&mut inline);
        let mut draft = Draft::default();
        append(&mut draft, inline);
        self.place(draft.finish(kind));
    }

    /// A block goes to its section, or waits for the text that it stands in.
    fn place(&mut self, mut block: Block) {
        block.section = self.outline.current();
        if self.suspended.is_empty() && self.table.is_none() {
            self.outline.blocks.push(block);
        } else {
            self.held.push(block);
        }
        self.release();
    }

    fn release(&mut self) {
        // Texts that were put aside are few; only those of notes and floats in each other.
        let waits = self.table.is_some() || self.suspended.iter().rev().take(8).any(|s| !s.0.is_blank());
        let within = !self.suspended.is_empty() || self.inline.is_blank();
        if !waits && within {
            self.outline.blocks.append(&mut self.held);
        }
    }

    fn end_title(&mut self) {
        let title = self.inline.text.trim().to_owned();
        let kind = SectionKind::of_title(&title);
        self.flow = Flow::Heading;
        self.flush();
        if self.outline.current() == self.title {
            self.outline.name(&title, None);
        } else if !title.is_empty() {
            let current = self.outline.current() as usize;
            let above = self.outline.sections[current].parent.unwrap_or(0);
            self.outline.name(&title, self.allowed(kind, above));
        }
    }

    /// In the back matter a section is back matter, unless it is a part of the paper that stands there.
    /// "Objective measures" within the results introduces nothing.
    fn allowed(&self, kind: Option<SectionKind>, above: u32) -> Option<SectionKind> {
        use SectionKind::*;
        let above = self.outline.sections[above as usize].kind;
        kind.filter(|k| !self.back || matches!(k, Methods | Results | Discussion))
            .filter(|k| *k != Introduction || !matches!(above, Methods | Results | Discussion))
    }

    fn end_label(&mut self, own: Range<usize>, at: usize) {
        if own.is_empty() {
            return;
        }
        // `a` before a note is what stands raised in the table.
        if self.flow == Flow::Note && own.start == 0 && own.len() <= 4 {
            self.raise(own);
        }
        self.pause(at..at);
        self.labelled = true;
    }

    /// Marks a short reference to a note as raised, unless it is.
    fn raise(&mut self, own: Range<usize>) {
        let inside =
            |m: &Mark| m.kind == MarkKind::Superscript && own.start < m.end as usize && (m.start as usize) < own.end;
        let raised = self.inline.marks.iter().rev().take(8).any(inside)
            || self.stack.iter().rev().take(4).any(|o| o.role == Role::Mark(MarkKind::Superscript));
        if !raised && self.inline.text[own.clone()].chars().count() <= 6 {
            self.inline.mark(own.start, own.end, MarkKind::Superscript);
        }
    }

    fn end_table(&mut self) {
        self.inline = Inline::default();
        self.fresh();
        match self.table.take().map(Table::build) {
            Some(Built::Table(block)) => self.place(*block),
            Some(Built::Cells(cells)) => {
                for cell in cells {
                    self.push(cell, BlockKind::Paragraph);
                }
            }
            Some(Built::Nothing) | None => {}
        }
        self.resume();
    }

    // Formulas.

    fn end_tex(&mut self) {
        let Some(tex) = self.tex.take().filter(|t| !t.is_empty()) else { return };
        match &mut self.formula {
            Some(formula) => formula.tex = Some(tex),
            None => self.push_tex(tex),
        }
    }

    fn push_tex(&mut self, tex: Range<usize>) {
        if self.is_quiet() {
            return;
        }
        let whole = &self.source[tex.clone()];
        let body = math::body(whole);
        let start = self.inline.text.len();
        let readable = !body.contains('<') && !body.contains("&#");
        match math::shown(&body.replace("&lt;", "\\lt ").replace("&gt;", "\\gt ")) {
            Some(shown) if readable => self.inline.push_other(&shown, tex),
            _ => {
                let words: Vec<&str> = body.split_whitespace().collect();
                self.inline.push_other(&words.join(" "), tex);
                self.as_math(start..self.inline.text.len());
            }
        }
    }

    /// A formula that is no line of text: what is marked in it does not count.
    fn as_math(&mut self, own: Range<usize>) {
        let marks = &mut self.inline.marks;
        while marks.last().is_some_and(|m| m.start as usize >= own.start) {
            marks.pop();
        }
        self.inline.mark(own.start, own.end, MarkKind::Math);
    }

    // The end.

    pub fn finish(mut self) -> Article {
        let end = self.source.len();
        let truncated = self.stack.iter().any(|o| o.name == "article") || self.deeper > 0;
        self.deeper = 0;
        while !self.stack.is_empty() {
            self.close(end..end);
        }
        self.flush();
        self.outline.blocks.append(&mut self.held);
        let notices = self.slips.notices(self.source, truncated, !self.outline.blocks.is_empty());
        Article { sections: self.outline.sections, blocks: self.outline.blocks, notices }
    }
}

fn is_space(c: char) -> bool {
    matches!(c, ' ' | '\t' | '\n' | '\r')
}
