//! Lines and columns of a source text.

/// Where each line of a text starts. Lines end at `\n`, `\r\n` or a lone `\r`.
#[derive(Clone, Debug, Default)]
pub struct LineIndex {
    starts: Vec<u32>,
}

impl LineIndex {
    pub fn new(text: &str) -> LineIndex {
        let bytes = text.as_bytes();
        let mut starts = vec![0];
        for (i, &b) in bytes.iter().enumerate() {
            if b == b'\n' || (b == b'\r' && bytes.get(i + 1) != Some(&b'\n')) {
                starts.push(i as u32 + 1);
            }
        }
        LineIndex { starts }
    }

    /// Line and column, both from 1, of a byte offset; the column counts characters.
    pub fn position(&self, text: &str, offset: usize) -> (u32, u32) {
        let line = self.starts.partition_point(|&s| s as usize <= offset).max(1) - 1;
        let start = self.starts.get(line).map_or(0, |&s| s as usize);
        let column = text.get(start..offset).map_or(0, |s| s.chars().count());
        (line as u32 + 1, column as u32 + 1)
    }
}
