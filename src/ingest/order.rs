//! Natural order of ids: numbers within a text count by their value.

use std::cmp::Ordering;

/// Compares two ids, so that `2` comes before `10` and `p9` before `p10`; equal values in order of text.
///
/// ```
/// use tailchase::ingest::natural_order;
/// let mut ids = ["10", "9", "a2", "a10", "1"];
/// ids.sort_by(|a, b| natural_order(a, b));
/// assert_eq!(ids, ["1", "9", "10", "a2", "a10"]);
/// ```
pub fn natural_order(a: &str, b: &str) -> Ordering {
    let (mut left, mut right) = (a.as_bytes(), b.as_bytes());
    loop {
        match (left, right) {
            ([], _) | (_, []) => return left.len().cmp(&right.len()).then_with(|| a.cmp(b)),
            ([l, ..], [r, ..]) if l.is_ascii_digit() && r.is_ascii_digit() => {
                let (x, left_rest) = digits(left);
                let (y, right_rest) = digits(right);
                let order = x.len().cmp(&y.len()).then_with(|| x.cmp(y));
                if order != Ordering::Equal {
                    return order;
                }
                (left, right) = (left_rest, right_rest);
            }
            ([l, left_rest @ ..], [r, right_rest @ ..]) => {
                if l != r {
                    return l.cmp(r);
                }
                (left, right) = (left_rest, right_rest);
            }
        }
    }
}

/// The leading digits without leading zeros, and what follows.
fn digits(text: &[u8]) -> (&[u8], &[u8]) {
    let end = text.iter().position(|b| !b.is_ascii_digit()).unwrap_or(text.len());
    let (number, rest) = text.split_at(end);
    let zeros = number.iter().take_while(|b| **b == b'0').count();
    (&number[zeros..], rest)
}
