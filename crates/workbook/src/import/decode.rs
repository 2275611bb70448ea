//! Bytes of a file to text.

use super::{LONGEST, Refusal};
use std::borrow::Cow;

/// How the text was encoded.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash)]
pub enum Encoding {
    /// UTF-8, with or without byte order mark.
    Utf8,
    /// UTF-16, told by its byte order mark.
    Utf16,
    /// None of these: read as Western European (windows-1252, of which
    /// Latin-1's printable part is a share).
    Western,
}

/// What the bytes 0x80 to 0x9F mean in windows-1252 (WHATWG Encoding Standard,
/// index-windows-1252; from memory).
const UPPER: [char; 32] = [
    '€', '\u{81}', '‚', 'ƒ', '„', '…', '†', '‡', 'ˆ', '‰', 'Š', '‹', 'Œ', '\u{8d}', 'Ž', '\u{8f}',
    '\u{90}', '‘', '’', '“', '”', '•', '–', '—', '˜', '™', 'š', '›', 'œ', '\u{9d}', 'ž', 'Ÿ',
];

/// The text of a file, its lines ended by `\n` alone, without byte order mark.
///
/// # Errors
/// [`Refusal`] where it is too long, empty, packed or not text.
pub fn decode(bytes: &[u8]) -> Result<(Cow<'_, str>, Encoding), Refusal> {
    if bytes.len() > LONGEST {
        return Err(Refusal::TooLong { bytes: bytes.len() });
    }
    // What zip archives (xlsx, ods, kmz) and compound files (xls) begin with,
    // and a gzip or PDF file.
    let packed: [&[u8]; 4] = [b"PK\x03\x04", b"\xd0\xcf\x11\xe0", b"\x1f\x8b", b"%PDF"];
    if packed.iter().any(|p| bytes.starts_with(p)) {
        return Err(Refusal::Packed);
    }
    let (text, encoding) = match bytes {
        [0xff, 0xfe, rest @ ..] => (Cow::Owned(utf16(rest, u16::from_le_bytes)), Encoding::Utf16),
        [0xfe, 0xff, rest @ ..] => (Cow::Owned(utf16(rest, u16::from_be_bytes)), Encoding::Utf16),
        _ => {
            let rest = bytes.strip_prefix(b"\xef\xbb\xbf").unwrap_or(bytes);
            match std::str::from_utf8(rest) {
                Ok(text) => (Cow::Borrowed(text), Encoding::Utf8),
                Err(_) => (Cow::Owned(western(rest)), Encoding::Western),
            }
        }
    };
    if text.contains('\0') {
        return Err(Refusal::NotText);
    }
    if text.trim().is_empty() {
        return Err(Refusal::Empty);
    }
    Ok((plain_lines(text), encoding))
}

/// Ends every line with `\n` alone: `\r\n` and a lone `\r` end one too.
pub(super) fn plain_lines(text: Cow<'_, str>) -> Cow<'_, str> {
    if text.contains('\r') {
        Cow::Owned(text.replace("\r\n", "\n").replace('\r', "\n"))
    } else {
        text
    }
}

fn utf16(bytes: &[u8], unit: fn([u8; 2]) -> u16) -> String {
    let (pairs, odd) = bytes.as_chunks::<2>();
    let units = pairs.iter().map(|pair| unit(*pair));
    let mut text: String = char::decode_utf16(units)
        .map(|c| c.unwrap_or(char::REPLACEMENT_CHARACTER))
        .collect();
    if !odd.is_empty() {
        text.push(char::REPLACEMENT_CHARACTER);
    }
    text
}

fn western(bytes: &[u8]) -> String {
    bytes
        .iter()
        .map(|b| match b {
            0x80..=0x9f => UPPER[usize::from(b - 0x80)],
            _ => char::from(*b),
        })
        .collect()
}

#[cfg(test)]
mod tests {
    use super::*;
    use proptest::prelude::*;

    #[test]
    fn each_encoding_gives_the_same_text() {
        let text = "Nivel á °\n";
        let utf16 = |bytes: fn(u16) -> [u8; 2]| -> Vec<u8> {
            std::iter::once(0xfeff)
                .chain(text.encode_utf16())
                .flat_map(bytes)
                .collect()
        };
        for (bytes, encoding) in [
            (text.as_bytes().to_vec(), Encoding::Utf8),
            (format!("\u{feff}{text}").into_bytes(), Encoding::Utf8),
            (utf16(u16::to_le_bytes), Encoding::Utf16),
            (utf16(u16::to_be_bytes), Encoding::Utf16),
            (b"Nivel \xe1 \xb0\n".to_vec(), Encoding::Western),
            (b"Nivel \xe1 \xb0\r\n".to_vec(), Encoding::Western),
            (b"Nivel \xe1 \xb0\r".to_vec(), Encoding::Western),
        ] {
            assert_eq!(decode(&bytes).unwrap(), (Cow::Borrowed(text), encoding));
        }
        assert_eq!(decode(b"\x80 \x96").unwrap().0, "€ –");
    }

    #[test]
    fn what_is_no_text_is_named() {
        assert_eq!(decode(b""), Err(Refusal::Empty));
        assert_eq!(decode(b"\xef\xbb\xbf \r\n"), Err(Refusal::Empty));
        assert_eq!(decode(b"PK\x03\x04\x14\0"), Err(Refusal::Packed));
        assert_eq!(decode(b"1,2\0\0"), Err(Refusal::NotText));
        assert_eq!(
            decode(&vec![b'1'; LONGEST + 1]),
            Err(Refusal::TooLong { bytes: LONGEST + 1 })
        );
    }

    proptest! {
        #[test]
        fn any_bytes_are_text_or_refused(bytes in proptest::collection::vec(any::<u8>(), 0..200)) {
            if let Ok((text, _)) = decode(&bytes) {
                prop_assert!(!text.contains(['\0', '\r']));
            }
        }
    }
}
