//! The packing of the program in the page: raw LZMA, as `shell/unpack.js` reads it.

use std::io::{Result, Write as _};

use lzma_rust2::{EncodeMode, LzmaOptions, LzmaWriter, MfType};

/// Bits of the byte before a literal that the literal's chances depend on; `shell/unpack.js` knows it.
const LITERAL_CONTEXT: u32 = 4;
/// Bits of the place in the output that chances depend on; `shell/unpack.js` knows it.
const POSITION: u32 = 0;
/// The longest match there is: none is taken without looking for a better one.
const NICE_LENGTH: u32 = 273;
/// How far the encoder looks at all; 0 leaves it to the encoder.
const DEPTH: i32 = 0;
const SMALLEST_DICTIONARY: u32 = 4096;

/// Packs bytes, as tightly as it goes; the page is built once and opened often.
pub(crate) fn pack(bytes: &[u8]) -> Result<Vec<u8>> {
    let dictionary = u32::try_from(bytes.len()).unwrap_or(u32::MAX).max(SMALLEST_DICTIONARY);
    let (normal, tree) = (EncodeMode::Normal, MfType::Bt4);
    let options = LzmaOptions::new(dictionary, LITERAL_CONTEXT, POSITION, POSITION, normal, NICE_LENGTH, tree, DEPTH);
    let mut writer = LzmaWriter::new_no_header(Vec::new(), &options, false)?;
    writer.write_all(bytes)?;
    writer.finish()
}
