//! Finds separators, line ends and quotes in delimited text, 64 bytes at a time.

/// Bit i is set where byte i of the block is `separator`, a line feed or a quote. The comparison is a loop that
/// compilers turn into vector code; eight truth bytes become eight bits by one multiplication.
#[inline(always)]
pub(crate) fn specials(block: &[u8; 64], separator: u8) -> u64 {
    let mut hits = [0_u8; 64];
    for (hit, b) in hits.iter_mut().zip(block) {
        *hit = u8::from(*b == separator) | u8::from(*b == b'\n') | u8::from(*b == b'"');
    }
    let mut mask = 0_u64;
    for (i, eight) in hits.chunks_exact(8).enumerate() {
        let word = u64::from_le_bytes(eight.try_into().unwrap_or_default());
        mask |= (word.wrapping_mul(0x0102_0408_1020_4080) >> 56) << (8 * i);
    }
    mask
}

/// One record: where its fields stand in the text it was found in.
#[derive(Clone, Copy, Debug, Default, PartialEq, Eq)]
pub(crate) struct Span {
    pub start: u32,
    pub end: u32,
}

/// What a record with quotes turned out to be.
#[derive(Debug, PartialEq, Eq)]
pub(crate) enum Quoted {
    /// The record ends at this offset (its line feed, or the end of the text).
    Ends(usize),
    /// The text ends inside a quoted field, the one with this number.
    Open(usize),
    /// The text ends before the record does, outside of quotes.
    Short,
}

/// Reads one record that has quotes, from `start` on: fields unquoted into `fields`, their spans into `spans`.
/// A quote opens a field only as its first byte; within quotes a doubled quote is one quote. `is_last`: nothing follows the text.
pub(crate) fn quoted_record(
    text: &[u8],
    start: usize,
    separator: u8,
    is_last: bool,
    fields: &mut Vec<u8>,
    spans: &mut Vec<Span>,
) -> Quoted {
    fields.clear();
    spans.clear();
    let mut at = start;
    loop {
        let first = fields.len() as u32;
        if text.get(at) == Some(&b'"') {
            at += 1;
            loop {
                match (text.get(at), text.get(at + 1)) {
                    (None, _) => return Quoted::Open(spans.len()),
                    (Some(b'"'), Some(b'"')) => {
                        fields.push(b'"');
                        at += 2;
                    }
                    (Some(b'"'), None) if !is_last => return Quoted::Open(spans.len()),
                    (Some(b'"'), _) => {
                        at += 1;
                        break;
                    }
                    (Some(b), _) => {
                        fields.push(*b);
                        at += 1;
                    }
                }
            }
        }
        while let Some(b) = text.get(at).filter(|b| **b != separator && **b != b'\n') {
            fields.push(*b);
            at += 1;
        }
        let mut end = fields.len() as u32;
        let at_end = text.get(at) != Some(&separator);
        if at_end && end > first && fields[end as usize - 1] == b'\r' {
            end -= 1;
        }
        spans.push(Span { start: first, end });
        match text.get(at) {
            Some(b) if *b == separator => at += 1,
            Some(_) => return Quoted::Ends(at),
            None if is_last => return Quoted::Ends(at),
            None => return Quoted::Short,
        }
    }
}
