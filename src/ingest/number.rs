//! Numbers from bytes, quickly and correctly rounded.

/// What a field holds.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(crate) enum Read {
    Number(f64),
    Missing,
    /// Text where a number should be.
    Text,
}

const POWERS: [f64; 23] =
    [1e0, 1e1, 1e2, 1e3, 1e4, 1e5, 1e6, 1e7, 1e8, 1e9, 1e10, 1e11, 1e12, 1e13, 1e14, 1e15, 1e16, 1e17, 1e18, 1e19, 1e20, 1e21, 1e22];

/// Reads a field as a number. Up to 15 digits are taken as a whole number m over a power of ten: both are exact in
/// binary, so that the one division rounds correctly (Clinger 1990); everything else goes to the standard library.
#[inline]
pub(crate) fn number(field: &[u8]) -> Read {
    let (negative, digits) = match field {
        [b'-', rest @ ..] => (true, rest),
        _ => (false, field),
    };
    let (mut m, mut seen, mut decimals, mut point) = (0_u64, 0_u32, 0_usize, false);
    if digits.len() > 16 {
        return slowly(field);
    }
    for &b in digits {
        let d = b.wrapping_sub(b'0');
        if d < 10 {
            m = m * 10 + u64::from(d);
            seen += 1;
            decimals += usize::from(point);
        } else if b == b'.' && !point {
            point = true;
        } else {
            return slowly(field);
        }
    }
    if seen == 0 || seen > 15 {
        return slowly(field);
    }
    let value = m as f64 / POWERS[decimals];
    Read::Number(if negative { -value } else { value })
}

#[cold]
fn slowly(field: &[u8]) -> Read {
    let field = field.trim_ascii();
    if is_missing(field) {
        return Read::Missing;
    }
    // Infinity is no place on a field: as good as missing.
    match std::str::from_utf8(field).ok().and_then(|t| t.parse::<f64>().ok()) {
        Some(v) if v.is_finite() => Read::Number(v),
        Some(_) => Read::Missing,
        None => Read::Text,
    }
}

/// Whether a field stands for "no value".
#[inline]
pub(crate) fn is_missing(field: &[u8]) -> bool {
    const WORDS: [&[u8]; 6] = [b"na", b"n/a", b"nan", b"null", b"none", b"nil"];
    field.is_empty() || (field.len() <= 4 && WORDS.iter().any(|w| field.eq_ignore_ascii_case(w)))
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn agrees_with_the_standard_library() {
        for text in [
            "0",
            "-0",
            "12.34",
            "119.99",
            "0.1",
            "-53.333333333333",
            "123456789.012345",
            "1e3",
            "+5",
            "00012.50",
            ".5",
            "7.",
            "9007199254740993",
        ] {
            let expected: f64 = text.parse().unwrap();
            assert_eq!(number(text.as_bytes()), Read::Number(expected), "{text}");
        }
    }

    #[test]
    fn missing_and_text() {
        for text in ["", "NA", "NaN", "null", "None", " ", "inf", "n/a"] {
            assert_eq!(number(text.as_bytes()), Read::Missing, "{text}");
        }
        for text in ["abc", "1,5", "1.2.3", "-", ".", "12 m"] {
            assert_eq!(number(text.as_bytes()), Read::Text, "{text}");
        }
    }
}
