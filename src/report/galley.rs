//! Lines of text with a margin beside them: wrapping, eliding, and what may safely be shown.

use std::collections::VecDeque;
use std::io::{self, Write};

use anstyle::Style;

/// Columns of the margin, the space before the text included.
pub const MARGIN: usize = 11;
/// Columns of a label within the text.
const LABEL: usize = 12;

/// A stretch of text set in one style.
pub type Piece<'a> = (Style, &'a str);

/// Writes text in a column, with notes running down the margin beside it.
pub struct Galley<'w> {
    out: &'w mut dyn Write,
    width: usize,
    notes: VecDeque<(Style, String)>,
}

impl<'w> Galley<'w> {
    /// `width` is that of the whole, margin included.
    pub fn new(out: &'w mut dyn Write, width: usize) -> Galley<'w> {
        Galley { out, width: width.max(MARGIN + LABEL + 20), notes: VecDeque::new() }
    }

    /// Puts a note in the margin, beside the next free line.
    pub fn note(&mut self, style: Style, text: impl Into<String>) {
        self.notes.push_back((style, text.into()));
    }

    /// Wrapped text.
    pub fn text(&mut self, pieces: &[Piece]) -> io::Result<()> {
        self.hang("", pieces)
    }

    /// Wrapped text behind a label.
    pub fn labelled(&mut self, label: &str, pieces: &[Piece]) -> io::Result<()> {
        self.hang(&format!("{label:<LABEL$}"), pieces)
    }

    /// A line that keeps its spaces and its breaks: text to be copied.
    pub fn as_it_stands(&mut self, text: &str) -> io::Result<()> {
        self.line(&[(Style::new(), clean(text))])
    }

    /// Wrapped text behind a right-aligned count.
    pub fn counted(&mut self, count: usize, text: &str) -> io::Result<()> {
        self.hang(&format!("{count:>5}  "), &[(Style::new(), text)])
    }

    /// A line without text; a note still waiting in the margin stands beside it.
    pub fn gap(&mut self) -> io::Result<()> {
        self.line(&[])
    }

    /// Writes the notes that still wait, one a line.
    pub fn flush(&mut self) -> io::Result<()> {
        while !self.notes.is_empty() {
            self.line(&[])?;
        }
        Ok(())
    }

    /// A line across the whole width, from the edge.
    pub fn across(&mut self, pieces: &[Piece]) -> io::Result<()> {
        self.flush()?;
        for line in wrap(pieces, self.width) {
            write_pieces(self.out, &line)?;
            writeln!(self.out)?;
        }
        Ok(())
    }

    /// Lines after the first start below the text, not below the label.
    fn hang(&mut self, label: &str, pieces: &[Piece]) -> io::Result<()> {
        let indent = columns(label);
        for (i, mut line) in wrap(pieces, self.width - MARGIN - indent).into_iter().enumerate() {
            if indent > 0 {
                let label = if i == 0 { label.to_owned() } else { " ".repeat(indent) };
                line.insert(0, (Style::new().dimmed(), label));
            }
            self.line(&line)?;
        }
        Ok(())
    }

    fn line(&mut self, pieces: &[(Style, String)]) -> io::Result<()> {
        let (style, note) = self.notes.pop_front().unwrap_or_default();
        if !note.is_empty() {
            write!(self.out, "{style}{note}{style:#}")?;
        }
        if !pieces.is_empty() {
            let pad = MARGIN.saturating_sub(columns(&note)).max(1);
            write!(self.out, "{:pad$}", "")?;
            write_pieces(self.out, pieces)?;
        }
        writeln!(self.out)
    }
}

fn write_pieces(out: &mut dyn Write, pieces: &[(Style, String)]) -> io::Result<()> {
    for (style, text) in pieces {
        write!(out, "{style}{text}{style:#}")?;
    }
    Ok(())
}

fn columns(text: &str) -> usize {
    text.chars().count()
}

/// Breaks at spaces; a word that is wider than a line is cut.
fn wrap(pieces: &[Piece], width: usize) -> Vec<Vec<(Style, String)>> {
    let mut lines: Vec<Vec<(Style, String)>> = vec![Vec::new()];
    let mut used = 0;
    for word in words(pieces) {
        let long: usize = word.iter().map(|(_, t)| columns(t)).sum();
        if used > 0 && used + 1 + long > width {
            lines.push(Vec::new());
            used = 0;
        } else if used > 0 {
            // A space within a style belongs to it; between two it is plain.
            let line = lines.last_mut().expect("there is always a line");
            let style = line.last().map(|l| l.0).filter(|&s| s == word[0].0).unwrap_or_default();
            add(line, style, ' ');
            used += 1;
        }
        for (style, text) in word {
            for c in text.chars() {
                if used == width {
                    lines.push(Vec::new());
                    used = 0;
                }
                add(lines.last_mut().expect("there is always a line"), style, c);
                used += 1;
            }
        }
    }
    lines
}

fn add(line: &mut Vec<(Style, String)>, style: Style, c: char) {
    match line.last_mut() {
        Some(last) if last.0 == style => last.1.push(c),
        _ => line.push((style, c.to_string())),
    }
}

/// Words, each of one or more pieces: a change of style within a word does not break it.
fn words<'a>(pieces: &[Piece<'a>]) -> Vec<Vec<(Style, &'a str)>> {
    let mut words: Vec<Vec<(Style, &str)>> = vec![Vec::new()];
    for &(style, text) in pieces {
        for (i, part) in text.split(' ').enumerate() {
            if i > 0 {
                words.push(Vec::new());
            }
            if let (Some(word), false) = (words.last_mut(), part.is_empty()) {
                word.push((style, part));
            }
        }
    }
    words.retain(|word| !word.is_empty());
    words
}

/// Text of a manuscript as it may be shown on a terminal: control characters, which could steer it,
/// and marks that reorder text are left out; ends of cells become dots, other white space one space.
pub fn clean(text: &str) -> String {
    let mut out = String::with_capacity(text.len());
    for c in text.chars() {
        match c {
            '\t' => out.push_str(" · "),
            '\u{a0}' | '\u{202f}' | '\u{2009}' => out.push('\u{a0}'),
            c if c.is_whitespace() => {
                if !out.ends_with(' ') {
                    out.push(' ');
                }
            }
            c if c.is_control() || is_reordering(c) => {}
            c => out.push(c),
        }
    }
    out
}

fn is_reordering(c: char) -> bool {
    matches!(c, '\u{200b}'..='\u{200f}' | '\u{202a}'..='\u{202e}' | '\u{2060}'..='\u{2069}' | '\u{feff}')
}

/// The end of a text, cut at a space, when it is longer than `most` characters.
pub fn last_part(text: &str, most: usize) -> String {
    let surplus = columns(text).saturating_sub(most);
    if surplus == 0 {
        return text.to_owned();
    }
    let cut = text.char_indices().nth(surplus).map_or(0, |(i, _)| i);
    let rest = &text[cut..];
    let rest = rest.split_once(' ').map_or(rest, |(_, r)| r);
    format!("… {rest}")
}

/// The start of a text, cut at a space, when it is longer than `most` characters.
pub fn first_part(text: &str, most: usize) -> String {
    match text.char_indices().nth(most) {
        None => text.to_owned(),
        Some((cut, _)) => {
            let kept = &text[..cut];
            format!("{} …", kept.rsplit_once(' ').map_or(kept, |(k, _)| k))
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    fn set(width: usize, write: impl FnOnce(&mut Galley) -> io::Result<()>) -> String {
        let mut out = Vec::new();
        let mut galley = Galley::new(&mut out, width);
        write(&mut galley).unwrap();
        galley.flush().unwrap();
        anstream::adapter::strip_str(&String::from_utf8(out).unwrap()).to_string()
    }

    #[test]
    fn notes_run_down_the_margin_beside_the_text() {
        let plain = Style::new();
        let text = set(43, |g| {
            g.note(plain, "Query 1");
            g.note(plain, "major");
            g.note(plain, "3:1");
            g.text(&[(plain, "one two three four five six "), (plain.bold(), "«seven»"), (plain, ".")])
        });
        assert_eq!(text, "Query 1    one two three four five six\nmajor      «seven».\n3:1\n");
    }

    #[test]
    fn no_line_is_wider_than_asked() {
        let plain = Style::new();
        let long = "x".repeat(200);
        let text =
            set(60, |g| g.labelled("working", &[(plain, "n = 24 and 25; "), (plain, &long), (plain, " and so on")]));
        assert!(text.lines().all(|l| l.chars().count() <= 60), "{text}");
        assert_eq!(text.matches('x').count(), 200);
    }

    #[test]
    fn a_manuscript_cannot_steer_the_terminal() {
        assert_eq!(clean("a\u{1b}[2Jb\n\n c\u{202e}d\te"), "a[2Jb cd · e");
    }

    #[test]
    fn elides_at_spaces() {
        assert_eq!(last_part("one two three", 8), "… three");
        assert_eq!(first_part("one two three", 8), "one two …");
        assert_eq!(first_part("one", 8), "one");
    }
}
