//! Times to whole microseconds: seconds, milliseconds, clock texts and dates with clock.

use super::mapping::TimeForm;
use super::number::{Read, number};

/// Stands for "no time" in a row.
pub(crate) const NO_TIME: i64 = i64::MIN;

/// Times beyond some sixty thousand years are no times; differences of two that are not stay whole numbers.
pub(crate) const FURTHEST_US: i64 = 2_000_000_000_000_000_000;

/// Microseconds of a time field: `Ok(NO_TIME)` where it is missing, `Err` where it is no time.
/// A number is seconds unless the form says milliseconds; a text with a colon is a clock, with or without a date.
#[inline]
pub(crate) fn time_us(field: &[u8], form: Option<TimeForm>) -> Result<i64, ()> {
    if let Some(us) = of_full_stamp(field) {
        return Ok(us);
    }
    if form != Some(TimeForm::Clock) {
        match number(field) {
            Read::Number(v) => return of_number(v, form),
            Read::Missing => return Ok(NO_TIME),
            Read::Text => {}
        }
    }
    of_clock(field.trim_ascii()).ok_or(())
}

pub(crate) fn of_number(value: f64, form: Option<TimeForm>) -> Result<i64, ()> {
    let us = value * if form == Some(TimeForm::Milliseconds) { 1e3 } else { 1e6 };
    if us.abs() < FURTHEST_US as f64 { Ok(us.round() as i64) } else { Err(()) }
}

/// The most usual stamp, `yyyy-mm-ddThh:mm:ss` with or without a fraction and `Z`, at fixed places; any other text is
/// left to [`of_clock`].
#[inline]
fn of_full_stamp(text: &[u8]) -> Option<i64> {
    let (head, tail) = text.split_first_chunk::<19>()?;
    let marks = head[4] == b'-' && head[7] == b'-' && matches!(head[10], b'T' | b' ') && head[13] == b':' && head[16] == b':';
    let digit = |i: usize| head[i].wrapping_sub(b'0');
    let is_digits = [0, 1, 2, 3, 5, 6, 8, 9, 11, 12, 14, 15, 17, 18].iter().all(|i| digit(*i) < 10);
    if !marks || !is_digits {
        return None;
    }
    let two = |i: usize| i64::from(digit(i)) * 10 + i64::from(digit(i + 1));
    let (month, day, hour, minute, second) = (two(5), two(8), two(11), two(14), two(17));
    let days = days_of_civil(two(0) * 100 + two(2), month, day)?;
    if minute > 59 || second > 60 {
        return None;
    }
    let tail = tail.strip_suffix(b"Z").unwrap_or(tail);
    let fraction_us = match tail {
        [] => 0,
        [b'.', digits @ ..] if !digits.is_empty() => fraction(digits)?,
        _ => return None,
    };
    Some((days * 86_400 + hour * 3600 + minute * 60 + second) * 1_000_000 + fraction_us)
}

/// `[date(T| )](h:)m:s(.fraction)(Z|±hh:mm)`.
fn of_clock(text: &[u8]) -> Option<i64> {
    let (days, clock) = match text.iter().position(|b| matches!(b, b'T' | b't' | b' ')) {
        Some(at) => (days_of_date(&text[..at])?, &text[at + 1..]),
        None => (0, text),
    };
    let (clock, zone_s) = split_zone(clock)?;
    let mut parts = [0_i64; 3];
    let mut count = 0;
    let mut rest = clock;
    let mut fraction_us = 0;
    loop {
        let cut = rest.iter().position(|b| !b.is_ascii_digit()).unwrap_or(rest.len());
        if cut == 0 || cut > 5 || count == 3 {
            return None;
        }
        parts[count] = whole(&rest[..cut]);
        count += 1;
        match rest.get(cut) {
            None => break,
            Some(b':') => rest = &rest[cut + 1..],
            Some(b'.' | b',') => {
                fraction_us = fraction(&rest[cut + 1..])?;
                break;
            }
            Some(_) => return None,
        }
    }
    let seconds = match count {
        3 if parts[1] < 60 && parts[2] < 61 => parts[0] * 3600 + parts[1] * 60 + parts[2],
        2 if parts[1] < 61 => parts[0] * 60 + parts[1],
        _ => return None,
    };
    Some((days * 86_400 + seconds - zone_s) * 1_000_000 + fraction_us)
}

fn split_zone(clock: &[u8]) -> Option<(&[u8], i64)> {
    if let [head @ .., b'Z' | b'z'] = clock {
        return Some((head, 0));
    }
    let Some(at) = clock.iter().position(|b| matches!(b, b'+' | b'-')) else { return Some((clock, 0)) };
    let digits: Vec<u8> = clock[at + 1..].iter().copied().filter(|b| *b != b':').collect();
    if digits.is_empty() || digits.len() > 4 || !digits.iter().all(u8::is_ascii_digit) {
        return None;
    }
    let (hours, minutes) = if digits.len() > 2 { (whole(&digits[..2]), whole(&digits[2..])) } else { (whole(&digits), 0) };
    let offset_s = hours * 3600 + minutes * 60;
    Some((&clock[..at], if clock[at] == b'-' { -offset_s } else { offset_s }))
}

fn whole(digits: &[u8]) -> i64 {
    digits.iter().fold(0, |n, d| n * 10 + i64::from(d - b'0'))
}

fn fraction(digits: &[u8]) -> Option<i64> {
    if !digits.iter().all(u8::is_ascii_digit) {
        return None;
    }
    let first: i64 = (0..6).fold(0, |n, i| n * 10 + digits.get(i).map_or(0, |d| i64::from(d - b'0')));
    Some(first + i64::from(digits.get(6).is_some_and(|d| *d >= b'5')))
}

/// Days from 1970-01-01 of `yyyy-mm-dd` in the Gregorian calendar.
fn days_of_date(date: &[u8]) -> Option<i64> {
    let mut parts = date.split(|b| matches!(b, b'-' | b'/'));
    let mut next = || parts.next().filter(|p| !p.is_empty() && p.len() <= 4 && p.iter().all(u8::is_ascii_digit)).map(whole);
    let (year, month, day) = (next()?, next()?, next()?);
    days_of_civil(year, month, day)
}

fn days_of_civil(year: i64, month: i64, day: i64) -> Option<i64> {
    if !(1..=12).contains(&month) || !(1..=31).contains(&day) || year < 100 {
        return None;
    }
    // Years counted from March, so that a leap day ends its year.
    let y = if month <= 2 { year - 1 } else { year };
    let from_march = (month + 9) % 12;
    let day_of_year = (153 * from_march + 2) / 5 + day - 1;
    Some(y * 365 + y.div_euclid(4) - y.div_euclid(100) + y.div_euclid(400) + day_of_year - 719_468)
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn forms() {
        assert_eq!(time_us(b"12.3", None), Ok(12_300_000));
        assert_eq!(time_us(b"1500", Some(TimeForm::Milliseconds)), Ok(1_500_000));
        assert_eq!(time_us(b"19:03:05.1", None), Ok(68_585_100_000));
        assert_eq!(time_us(b"3:05", None), Ok(185_000_000));
        // python: datetime(2026,9,13,19,3,5,100000,tzinfo=utc).timestamp() = 1789326185.1
        assert_eq!(time_us(b"2026-09-13T19:03:05.100Z", None), Ok(1_789_326_185_100_000));
        assert_eq!(time_us(b"2026-09-13 21:03:05.1+02:00", None), Ok(1_789_326_185_100_000));
        assert_eq!(time_us(b"NA", None), Ok(NO_TIME));
        for bad in ["abc", "1:2:3:4", "12:61:00", "2026-13-01T00:00:00", "5:", "1e30"] {
            assert_eq!(time_us(bad.as_bytes(), None), Err(()), "{bad}");
        }
    }
}
