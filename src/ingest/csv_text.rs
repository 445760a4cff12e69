//! Delimited text as records: header, separator, blocks of whole records with bounded memory.

use super::IngestError;
use super::bytes;
use super::scan::{Quoted, Span, quoted_record, specials};
use std::io::Read;
use std::path::{Path, PathBuf};

/// Bytes held at a time; a record may be longer, up to [`LONGEST_RECORD`].
const BLOCK: usize = 1 << 20;
/// A quoted field longer than this is taken for one that is never closed.
const LONGEST_RECORD: usize = 1 << 26;

/// An open text file after its header.
pub(crate) struct CsvText {
    path: PathBuf,
    input: Box<dyn Read + Send>,
    text: Vec<u8>,
    at: usize,
    is_last: bool,
    pub separator: u8,
    pub columns: Vec<String>,
    /// Data rows handed out so far.
    pub row: u64,
    unquoted: Vec<u8>,
    spans: Vec<Span>,
}

impl CsvText {
    pub fn open(path: &Path) -> Result<CsvText, IngestError> {
        let input = bytes::open(path).map_err(|e| IngestError::unreadable(path, &e))?;
        let mut text = CsvText {
            path: path.to_path_buf(),
            input,
            text: Vec::new(),
            at: 0,
            is_last: false,
            separator: b',',
            columns: Vec::new(),
            row: 0,
            unquoted: Vec::new(),
            spans: Vec::new(),
        };
        text.refill()?;
        text.header()?;
        Ok(text)
    }

    /// Whether anything follows the header.
    pub fn has_rows(&self) -> bool {
        !(self.is_last && self.text[self.at..].trim_ascii().is_empty())
    }

    fn header(&mut self) -> Result<(), IngestError> {
        if self.text.starts_with(&[0xff, 0xfe]) || self.text.starts_with(&[0xfe, 0xff]) {
            return Err(self.not_utf8("the header", "UTF-16"));
        }
        if self.text.starts_with(&[0xef, 0xbb, 0xbf]) {
            self.at = 3;
        }
        while matches!(self.text.get(self.at), Some(b'\r' | b'\n')) {
            self.at += 1;
        }
        if self.text[self.at..].trim_ascii().is_empty() {
            return Err(IngestError::EmptyFile { path: self.path.clone() });
        }
        self.separator = sniff(&self.text[self.at..]);
        loop {
            let found = quoted_record(&self.text, self.at, self.separator, self.is_last, &mut self.unquoted, &mut self.spans);
            match found {
                Quoted::Ends(end) => {
                    self.at = (end + 1).min(self.text.len());
                    break;
                }
                _ if self.is_last || self.text.len() >= LONGEST_RECORD => {
                    return Err(IngestError::UnclosedQuote { path: self.path.clone(), row: 0, column: "of the header".into() });
                }
                _ => self.refill()?,
            }
        }
        for i in 0..self.spans.len() {
            let field = &self.unquoted[self.spans[i].start as usize..self.spans[i].end as usize];
            match std::str::from_utf8(field) {
                Ok(name) => self.columns.push(name.trim().to_string()),
                Err(_) => return Err(self.not_utf8("the header", &shown(field))),
            }
        }
        Ok(())
    }

    /// Hands each record that the held text has whole to `on_record` with its row number, then reads on.
    /// False when the file is at its end.
    pub fn block(&mut self, on_record: &mut impl FnMut(u64, &[u8], &[Span]) -> Result<(), IngestError>) -> Result<bool, IngestError> {
        let expected = self.columns.len();
        let separator = self.separator;
        let mut spans = std::mem::take(&mut self.spans);
        let mut start = self.at;
        let mut field_start = start;
        let mut at = start;
        // Inside quotes; and the closing quote of the field at hand.
        let (mut open, mut closed): (bool, Option<usize>) = (false, None);
        spans.clear();
        let mut tail = [0_u8; 64];
        'blocks: while at < self.text.len() {
            let block = match self.text[at..].first_chunk::<64>() {
                Some(block) => block,
                None => {
                    tail.fill(0);
                    let rest = &self.text[at..];
                    tail[..rest.len()].copy_from_slice(rest);
                    &tail
                }
            };
            let mut mask = specials(block, separator);
            while mask != 0 {
                let here = at + mask.trailing_zeros() as usize;
                mask &= mask - 1;
                let b = self.text[here];
                if b == b'"' {
                    if !open {
                        open = here == field_start;
                        continue;
                    }
                    if self.closes(here) {
                        (open, closed) = (false, Some(here));
                        continue;
                    }
                    // A doubled quote or text after a quote: this record is read byte by byte, then blocks go on after it.
                    let Some(end) = self.quoted(start, &mut spans)? else { break 'blocks };
                    self.row += 1;
                    self.check_count(spans.len(), expected)?;
                    on_record(self.row, &self.unquoted, &spans)?;
                    spans.clear();
                    start = (end + 1).min(self.text.len());
                    (field_start, at, open, closed) = (start, start, false, None);
                    continue 'blocks;
                }
                if open {
                    continue;
                }
                if b == separator {
                    spans.push(span(field_start, here, closed.take()));
                    field_start = here + 1;
                } else {
                    let end = if here > field_start && self.text[here - 1] == b'\r' { here - 1 } else { here };
                    let is_blank = spans.is_empty() && end == field_start;
                    if !is_blank {
                        spans.push(span(field_start, end, closed.take()));
                        self.row += 1;
                        self.check_count(spans.len(), expected)?;
                        on_record(self.row, &self.text, &spans)?;
                        spans.clear();
                    }
                    field_start = here + 1;
                    start = field_start;
                }
            }
            at += 64;
        }
        if self.is_last && start < self.text.len() {
            if open {
                // Names the field whose quote is never closed.
                self.quoted(start, &mut spans)?;
            }
            let end = self.text.len() - usize::from(self.text.ends_with(b"\r"));
            if end > start {
                spans.push(span(field_start, end.max(field_start), closed));
                self.row += 1;
                self.check_count(spans.len(), expected)?;
                on_record(self.row, &self.text, &spans)?;
            }
            start = self.text.len();
        } else if open && self.text.len() - start >= LONGEST_RECORD {
            self.quoted(start, &mut spans)?;
        }
        self.at = start;
        self.spans = spans;
        if self.is_last {
            return Ok(false);
        }
        self.refill()?;
        Ok(true)
    }

    /// Whether the quote at this place closes its field plainly: a separator, a line end or the end of the file follows.
    fn closes(&self, quote: usize) -> bool {
        match self.text.get(quote + 1) {
            Some(b'\n') => true,
            Some(b'\r') => self.text.get(quote + 2) == Some(&b'\n'),
            Some(b) => *b == self.separator,
            None => self.is_last,
        }
    }

    /// The end of a record with quotes, its fields in `unquoted`; `None` when more text is needed.
    fn quoted(&mut self, start: usize, spans: &mut Vec<Span>) -> Result<Option<usize>, IngestError> {
        match quoted_record(&self.text, start, self.separator, self.is_last, &mut self.unquoted, spans) {
            Quoted::Ends(end) => Ok(Some(end)),
            Quoted::Open(field) if self.is_last || self.text.len() - start >= LONGEST_RECORD => {
                let column = self.columns.get(field).cloned().unwrap_or_else(|| (field + 1).to_string());
                Err(IngestError::UnclosedQuote { path: self.path.clone(), row: self.row + 1, column })
            }
            _ => Ok(None),
        }
    }

    fn check_count(&self, found: usize, expected: usize) -> Result<(), IngestError> {
        if found == expected { Ok(()) } else { Err(IngestError::FieldCount { path: self.path.clone(), row: self.row, expected, found }) }
    }

    /// Keeps what is not yet used and fills up behind it.
    fn refill(&mut self) -> Result<(), IngestError> {
        self.text.drain(..self.at);
        self.at = 0;
        if self.text.len() >= LONGEST_RECORD {
            return Err(IngestError::LongRecord { path: self.path.clone(), row: self.row + 1 });
        }
        let room = BLOCK.max(self.text.len());
        let before = self.text.len();
        let read =
            self.input.by_ref().take(room as u64).read_to_end(&mut self.text).map_err(|e| IngestError::unreadable(&self.path, &e))?;
        self.is_last = self.text.len() - before < room || read == 0;
        Ok(())
    }

    fn not_utf8(&self, column: &str, found: &str) -> IngestError {
        IngestError::NotUtf8 { path: self.path.clone(), row: 0, column: column.into(), found: found.into() }
    }
}

/// The field's span: what its quotes hold where it has some.
#[inline]
fn span(start: usize, end: usize, closing_quote: Option<usize>) -> Span {
    match closing_quote {
        Some(quote) => Span { start: start as u32 + 1, end: quote as u32 },
        None => Span { start: start as u32, end: end as u32 },
    }
}

/// Bytes for a message, what is no UTF-8 as escapes, cut after forty.
pub(crate) fn shown(field: &[u8]) -> String {
    field.iter().take(40).flat_map(|b| std::ascii::escape_default(*b)).map(char::from).collect()
}

/// The separator: of comma, semicolon, tab and bar the one that the header has most often outside of quotes.
fn sniff(text: &[u8]) -> u8 {
    const SEPARATORS: [u8; 4] = [b',', b';', b'\t', b'|'];
    let mut counts = [0_u32; 4];
    let mut in_quotes = false;
    for b in text {
        match b {
            b'"' => in_quotes = !in_quotes,
            b'\n' if !in_quotes => break,
            _ if in_quotes => {}
            b => {
                if let Some(i) = SEPARATORS.iter().position(|s| s == b) {
                    counts[i] += 1;
                }
            }
        }
    }
    let most = counts.iter().max().copied().unwrap_or(0);
    SEPARATORS[counts.iter().position(|c| *c == most).unwrap_or(0)]
}

#[cfg(test)]
mod tests {
    use super::*;
    use proptest::prelude::*;

    /// All records by this reader, the header first.
    fn records(bytes: &[u8]) -> Result<Vec<Vec<Vec<u8>>>, IngestError> {
        let file = tempfile::NamedTempFile::new().unwrap();
        std::fs::write(file.path(), bytes).unwrap();
        let mut text = CsvText::open(file.path())?;
        let mut out = vec![text.columns.iter().map(|c| c.clone().into_bytes()).collect::<Vec<_>>()];
        while text.block(&mut |_, bytes, spans| {
            out.push(spans.iter().map(|s| bytes[s.start as usize..s.end as usize].to_vec()).collect());
            Ok(())
        })? {}
        Ok(out)
    }

    /// The same by `csv::ReaderBuilder` of the csv crate.
    fn by_csv_crate(bytes: &[u8]) -> Vec<Vec<Vec<u8>>> {
        let mut reader = csv::ReaderBuilder::new().has_headers(false).flexible(true).from_reader(bytes);
        reader.byte_records().map(|r| r.unwrap().iter().map(<[u8]>::to_vec).collect()).collect()
    }

    fn field() -> impl Strategy<Value = String> {
        prop_oneof![
            "[a-z0-9.]{0,6}",
            Just("\"a,\"\"b\"\"\n c\"".to_string()),
            Just("\"\"".to_string()),
            "\"[a-z,\n]{0,70}\"",
            "[a-z]\"[a-z]{0,3}",
            "\"[a-z]{1,3}\"[a-z]{1,2}",
        ]
    }

    proptest! {
        #[test]
        fn agrees_with_the_csv_crate(rows in prop::collection::vec((field(), field(), field()), 0..60), crlf: bool, last: bool) {
            let end = if crlf { "\r\n" } else { "\n" };
            let mut text = format!("one,two,three{end}");
            for (i, (a, b, c)) in rows.iter().enumerate() {
                text.push_str(&format!("{a},{b},{c}{}", if last || i + 1 < rows.len() { end } else { "" }));
            }
            prop_assert_eq!(records(text.as_bytes()).unwrap(), by_csv_crate(text.as_bytes()));
        }
    }

    #[test]
    fn records_across_blocks_are_whole() {
        let mut text = String::from("a,b\n");
        for i in 0..60_000 {
            text.push_str(&format!("{i},\"{}\"\n", if i % 7 == 0 { "x\"\"y, z" } else { "plain text that fills the block" }));
        }
        assert!(text.len() > 2 * BLOCK);
        assert_eq!(records(text.as_bytes()).unwrap(), by_csv_crate(text.as_bytes()));
    }
}
