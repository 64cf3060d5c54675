//! From bytes to text, and back from offsets in the text to offsets in the bytes.
//!
//! The map back is kept as sparse checkpoints. Between two of them the original length of every
//! character is known from the encoding, so a look-up walks a few hundred bytes at most.

/// The encodings that intake knows.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum EncodingName {
    Utf8,
    Utf16Le,
    Utf16Be,
    Windows1252,
}

/// Text bytes between two checkpoints.
const STRIDE: usize = 512;

/// Decoded text with the map back to the bytes as given.
#[derive(Clone, Debug)]
pub struct Decoded {
    pub text: String,
    pub encoding: EncodingName,
    /// Bytes of the byte order mark, which the text does not hold.
    pub bom: usize,
    /// Sequences that the encoding does not allow; each became U+FFFD.
    pub replaced: usize,
    /// Length of the file as given, in bytes.
    size: usize,
    /// Offset in the text, offset in the bytes; in order, the first is `(0, bom)`.
    checkpoints: Vec<(usize, usize)>,
}

impl Decoded {
    /// The offset in the original bytes of an offset in `text`. Inside a character, where that
    /// character starts if its length differs in the file.
    pub fn original(&self, offset: usize) -> usize {
        let i = self.checkpoints.partition_point(|c| c.0 <= offset).max(1) - 1;
        let (text, bytes) = self.checkpoints[i];
        let at = match self.encoding {
            // A checkpoint follows every replaced sequence; all else has its own length.
            EncodingName::Utf8 => {
                let limit = self.checkpoints.get(i + 1).map_or(self.size, |c| c.1);
                (bytes + (offset - text)).min(limit)
            }
            EncodingName::Windows1252 => bytes + self.walked(text, offset).count(),
            EncodingName::Utf16Le | EncodingName::Utf16Be => {
                bytes + self.walked(text, offset).map(|c| c.len_utf16() * 2).sum::<usize>()
            }
        };
        at.min(self.size)
    }

    /// The characters from a checkpoint that end at or before an offset.
    fn walked(&self, checkpoint: usize, offset: usize) -> impl Iterator<Item = char> {
        let offset = offset.min(self.text.len());
        self.text[checkpoint..]
            .char_indices()
            .take_while(move |(i, c)| checkpoint + i + c.len_utf8() <= offset)
            .map(|(_, c)| c)
    }
}

/// Decodes UTF-8 (with or without BOM), UTF-16 with BOM or with an XML declaration, else Windows-1252.
/// What an XML declaration says counts where the bytes are not UTF-8 after all.
///
/// Bytes that are not quite UTF-8 are taken for damaged UTF-8 when they hold at least as many good
/// sequences of several bytes as bad ones: such sequences hardly occur in another encoding by chance.
pub fn decode(bytes: &[u8]) -> Decoded {
    if let Some(rest) = bytes.strip_prefix(b"\xFF\xFE") {
        return decode_utf16(rest, 2, EncodingName::Utf16Le, u16::from_le_bytes);
    }
    if let Some(rest) = bytes.strip_prefix(b"\xFE\xFF") {
        return decode_utf16(rest, 2, EncodingName::Utf16Be, u16::from_be_bytes);
    }
    // XML 1.0, appendix F: without a mark, the declaration itself shows the width of the characters.
    if bytes.starts_with(b"<\0?\0") {
        return decode_utf16(bytes, 0, EncodingName::Utf16Le, u16::from_le_bytes);
    }
    if bytes.starts_with(b"\0<\0?") {
        return decode_utf16(bytes, 0, EncodingName::Utf16Be, u16::from_be_bytes);
    }
    let body = bytes.strip_prefix(b"\xEF\xBB\xBF").unwrap_or(bytes);
    let bom = bytes.len() - body.len();
    if let Ok(text) = std::str::from_utf8(body) {
        return Decoded {
            text: text.to_owned(),
            encoding: EncodingName::Utf8,
            bom,
            replaced: 0,
            size: bytes.len(),
            checkpoints: vec![(0, bom)],
        };
    }
    let latin = declared(body).is_some_and(|name| is_latin(&name));
    if bom > 0 || (!latin && is_damaged_utf8(body)) {
        decode_damaged_utf8(body, bom, bytes.len())
    } else {
        decode_windows_1252(body)
    }
}

/// The encoding that an XML declaration names, in lower case.
pub fn declared(bytes: &[u8]) -> Option<String> {
    let head = &bytes[..bytes.len().min(200)];
    let head = head.strip_prefix(b"<?xml")?;
    let head = String::from_utf8_lossy(&head[..head.windows(2).position(|w| w == b"?>")?]).to_lowercase();
    let value = head.split_once("encoding")?.1.trim_start().strip_prefix('=')?.trim_start();
    let quote = value.chars().next().filter(|c| matches!(c, '"' | '\''))?;
    value[1..].split_once(quote).map(|(name, _)| name.to_owned())
}

/// Names of Windows-1252 and of the encodings that it contains (WHATWG Encoding Standard, section 4.2).
pub fn is_latin(name: &str) -> bool {
    encoding_rs::Encoding::for_label(name.as_bytes()) == Some(encoding_rs::WINDOWS_1252)
}

fn is_damaged_utf8(bytes: &[u8]) -> bool {
    let (mut good, mut bad) = (0usize, 0usize);
    for chunk in bytes.utf8_chunks() {
        good += chunk.valid().bytes().filter(|&b| b >= 0xC0).count();
        bad += usize::from(!chunk.invalid().is_empty());
    }
    good >= bad && good > 0
}

fn decode_damaged_utf8(body: &[u8], bom: usize, size: usize) -> Decoded {
    let mut text = String::with_capacity(body.len() + 16);
    let mut checkpoints = vec![(0, bom)];
    let (mut at, mut replaced) = (bom, 0);
    for chunk in body.utf8_chunks() {
        text.push_str(chunk.valid());
        at += chunk.valid().len();
        if !chunk.invalid().is_empty() {
            text.push(char::REPLACEMENT_CHARACTER);
            at += chunk.invalid().len();
            replaced += 1;
            checkpoints.push((text.len(), at));
        }
    }
    Decoded { text, encoding: EncodingName::Utf8, bom, replaced, size, checkpoints }
}

fn decode_windows_1252(bytes: &[u8]) -> Decoded {
    let (text, _) = encoding_rs::WINDOWS_1252.decode_without_bom_handling(bytes);
    let text = text.into_owned();
    let mut checkpoints = vec![(0, 0)];
    for (i, (at, _)) in text.char_indices().enumerate() {
        if at >= checkpoints[checkpoints.len() - 1].0 + STRIDE {
            checkpoints.push((at, i));
        }
    }
    Decoded { text, encoding: EncodingName::Windows1252, bom: 0, replaced: 0, size: bytes.len(), checkpoints }
}

/// `bom` is how many bytes stand before `body`.
fn decode_utf16(body: &[u8], bom: usize, encoding: EncodingName, unit: fn([u8; 2]) -> u16) -> Decoded {
    let size = body.len() + bom;
    let (pairs, rest) = body.as_chunks::<2>();
    let mut text = String::with_capacity(body.len());
    let mut checkpoints = vec![(0, bom)];
    let (mut at, mut replaced) = (bom, 0);
    for c in char::decode_utf16(pairs.iter().map(|&p| unit(p))) {
        if text.len() >= checkpoints[checkpoints.len() - 1].0 + STRIDE {
            checkpoints.push((text.len(), at));
        }
        let c = c.unwrap_or_else(|_| {
            replaced += 1;
            char::REPLACEMENT_CHARACTER
        });
        text.push(c);
        at += c.len_utf16() * 2;
    }
    if !rest.is_empty() {
        replaced += 1;
        text.push(char::REPLACEMENT_CHARACTER);
    }
    Decoded { text, encoding, bom, replaced, size, checkpoints }
}

#[cfg(test)]
mod tests {
    use super::*;

    /// Every character boundary maps to where the bytes of that character start.
    fn check(bytes: &[u8], lengths: impl Fn(char) -> usize) -> Decoded {
        let decoded = decode(bytes);
        let mut at = decoded.bom;
        for (i, c) in decoded.text.char_indices() {
            assert_eq!(decoded.original(i), at, "at {i}");
            at += lengths(c);
        }
        assert_eq!(decoded.original(decoded.text.len()), bytes.len());
        decoded
    }

    #[test]
    fn utf8_with_and_without_bom_is_the_identity_after_the_bom() {
        assert_eq!(check("é = 0.03".as_bytes(), char::len_utf8).bom, 0);
        assert_eq!(check("\u{FEFF}é = 0.03".as_bytes(), char::len_utf8).bom, 3);
    }

    #[test]
    fn utf16_maps_back_over_many_checkpoints() {
        let text = "P = 0.03 ± 1 𝑝 ".repeat(400);
        let mut le = vec![0xFF, 0xFE];
        let mut be = vec![0xFE, 0xFF];
        for u in text.encode_utf16() {
            le.extend(u.to_le_bytes());
            be.extend(u.to_be_bytes());
        }
        assert_eq!(check(&le, |c| c.len_utf16() * 2).text, text);
        let decoded = check(&be, |c| c.len_utf16() * 2);
        assert_eq!((decoded.text.as_str(), decoded.encoding), (text.as_str(), EncodingName::Utf16Be));
        be.push(0);
        assert_eq!(decode(&be).replaced, 1);
    }

    #[test]
    fn bytes_that_are_no_utf8_are_windows_1252() {
        // WHATWG Encoding Standard, index windows-1252: 0xB1 is U+00B1, 0x96 is U+2013.
        let bytes = b"12.1 \xB1 0.4, 3\x965. ".repeat(100);
        let decoded = check(&bytes, |_| 1);
        assert_eq!(decoded.encoding, EncodingName::Windows1252);
        assert!(decoded.text.starts_with("12.1 ± 0.4, 3–5."));
    }

    #[test]
    fn utf8_cut_off_or_with_a_bad_byte_stays_utf8() {
        let whole = "Mean 3.1 ± 0.2; α = 0.05 ±";
        let cut = &whole.as_bytes()[..whole.len() - 1];
        let decoded = decode(cut);
        assert_eq!((decoded.encoding, decoded.replaced), (EncodingName::Utf8, 1));
        assert_eq!(decoded.original(decoded.text.len()), cut.len());
        let mut bad = whole.as_bytes().to_vec();
        bad.insert(4, 0xFF);
        let decoded = decode(&bad);
        assert_eq!(decoded.replaced, 1);
        let at = decoded.text.find("α").unwrap();
        assert_eq!(&bad[decoded.original(at)..][..2], "α".as_bytes());
    }
}
