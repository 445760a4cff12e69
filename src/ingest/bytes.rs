//! A file's bytes, unpacked when they are gzip or zstd: told by their first bytes, not by the name.

use std::fs::File;
use std::io::{self, BufReader, Cursor, Read};
use std::path::Path;

/// Opens a file for reading its plain bytes.
pub(crate) fn open(path: &Path) -> io::Result<Box<dyn Read + Send>> {
    let mut file = File::open(path)?;
    let mut head = Vec::with_capacity(4);
    file.by_ref().take(4).read_to_end(&mut head)?;
    let whole = Cursor::new(head.clone()).chain(file);
    Ok(match head.as_slice() {
        [0x1f, 0x8b, ..] => Box::new(flate2::read::MultiGzDecoder::new(BufReader::with_capacity(1 << 18, whole))),
        [0x28, 0xb5, 0x2f, 0xfd] => Box::new(zstd::Decoder::new(whole)?),
        _ => Box::new(whole),
    })
}

/// Whether the file is Parquet: it begins with the four bytes that the format starts with.
pub(crate) fn is_parquet(path: &Path) -> io::Result<bool> {
    let mut head = Vec::with_capacity(4);
    File::open(path)?.take(4).read_to_end(&mut head)?;
    Ok(head == b"PAR1")
}
