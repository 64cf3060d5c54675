//! Lines and columns of a source text.

/// Bytes between two counts of characters.
const STRIDE: usize = 128;

/// Where each line of a text starts. Lines end at `\n`, `\r\n` or a lone `\r`.
#[derive(Clone, Debug, Default)]
pub struct LineIndex {
    starts: Vec<u32>,
    /// Characters that start before byte `i * STRIDE`, so that columns in long lines stay cheap.
    counts: Vec<u32>,
}

impl LineIndex {
    pub fn new(text: &str) -> LineIndex {
        let bytes = text.as_bytes();
        let (mut starts, mut counts, mut count) = (vec![0], Vec::with_capacity(bytes.len() / STRIDE + 1), 0);
        for (i, &b) in bytes.iter().enumerate() {
            if i % STRIDE == 0 {
                counts.push(count);
            }
            count += u32::from(is_start(b));
            if b == b'\n' || (b == b'\r' && bytes.get(i + 1) != Some(&b'\n')) {
                starts.push(i as u32 + 1);
            }
        }
        LineIndex { starts, counts }
    }

    /// Line and column, both from 1, of a byte offset; the column counts characters.
    pub fn position(&self, text: &str, offset: usize) -> (u32, u32) {
        let offset = offset.min(text.len());
        let line = self.starts.partition_point(|&s| s as usize <= offset).max(1) - 1;
        let start = self.starts.get(line).map_or(0, |&s| s as usize);
        let column = self.characters_before(text, offset) - self.characters_before(text, start);
        (line as u32 + 1, column + 1)
    }

    fn characters_before(&self, text: &str, offset: usize) -> u32 {
        let block = (offset / STRIDE).min(self.counts.len().saturating_sub(1));
        let rest = &text.as_bytes()[block * STRIDE..offset];
        self.counts.get(block).copied().unwrap_or(0) + rest.iter().filter(|&&b| is_start(b)).count() as u32
    }
}

/// The first byte of a character in UTF-8.
fn is_start(byte: u8) -> bool {
    byte & 0xC0 != 0x80
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn counts_lines_and_characters_as_a_walk_would() {
        let text = format!("aé\r\nb\rc\n\n{}x", "±1 ".repeat(2000));
        let index = LineIndex::new(&text);
        let (mut line, mut column) = (1, 1);
        for (i, c) in text.char_indices() {
            assert_eq!(index.position(&text, i), (line, column), "at {i}");
            let ends = c == '\n' || (c == '\r' && !text[i + 1..].starts_with('\n'));
            (line, column) = if ends { (line + 1, 1) } else { (line, column + 1) };
        }
        assert_eq!(index.position(&text, text.len()), (line, column));
        assert_eq!(LineIndex::new("").position("", 0), (1, 1));
    }
}
