//! Decoded Parquet columns to plain vectors: numbers, whole numbers, times, codes.

use super::clock::{FURTHEST_US, NO_TIME, of_number, time_us};
use super::mapping::TimeForm;
use super::number::{Read, number};
use super::parquet_file::Stored;
use super::row::{ColumnCoder, FURTHEST_FRAME, NO_FRAME};
use super::texts::{Coder, NONE, Texts};
use polars::prelude::{
    ArrayRef, BooleanType, Float32Type, Float64Type, Int32Type, Int64Type, PolarsDataType, StringType, UInt32Type, UInt64Type,
};
use std::convert::Infallible;

/// A value that is not what its column should hold: row within the group, and the text.
pub(crate) type Misfit = (usize, String);

type ArrayOf<T> = <T as PolarsDataType>::Array;

/// Calls `each` with every value of a numeric column as a number, NaN where it is missing; false for another type.
macro_rules! each_number {
    ($arrays:expr, $ty:ty, $each:expr) => {
        for array in $arrays {
            let Some(array) = array.as_any().downcast_ref::<ArrayOf<$ty>>() else { continue };
            match array.validity().filter(|v| v.unset_bits() > 0) {
                None => array.values().iter().for_each(|v| $each(Some(*v))),
                Some(_) => array.iter().for_each(|v| $each(v.copied())),
            }
        }
    };
}

/// Real numbers, NaN where missing. A text column is read as numbers.
pub(crate) fn reals(arrays: &[ArrayRef], stored: Stored, out: &mut Vec<f64>) -> Result<(), Misfit> {
    out.clear();
    match stored {
        Stored::Float64 => each_number!(arrays, Float64Type, |v: Option<f64>| out.push(v.filter(|v| v.is_finite()).unwrap_or(f64::NAN))),
        Stored::Float32 => each_number!(arrays, Float32Type, |v: Option<f32>| out.push(v.map_or(f64::NAN, f64_of_f32))),
        Stored::Int32 | Stored::Time32(_) | Stored::Date => {
            each_number!(arrays, Int32Type, |v: Option<i32>| out.push(v.map_or(f64::NAN, f64::from)))
        }
        Stored::UInt32 => each_number!(arrays, UInt32Type, |v: Option<u32>| out.push(v.map_or(f64::NAN, f64::from))),
        Stored::Int64 | Stored::Time64(_) | Stored::Stamp96 => {
            each_number!(arrays, Int64Type, |v: Option<i64>| out.push(v.map_or(f64::NAN, |v| v as f64)))
        }
        Stored::UInt64 => each_number!(arrays, UInt64Type, |v: Option<u64>| out.push(v.map_or(f64::NAN, |v| v as f64))),
        Stored::Text => {
            return each_text(arrays, |row, text| match text.map_or(Read::Missing, |t| number(t.as_bytes())) {
                Read::Text => Err((row, text.unwrap_or_default().to_string())),
                read => {
                    out.push(if let Read::Number(v) = read { v } else { f64::NAN });
                    Ok(())
                }
            });
        }
        Stored::Truth => return Err((0, "true or false".into())),
    }
    Ok(())
}

/// The number that a file's author wrote: single precision is taken by its shortest decimal text, so that 12.34 stays 12.34.
fn f64_of_f32(v: f32) -> f64 {
    if !v.is_finite() {
        return f64::NAN;
    }
    // Two to five decimals are usual: whole steps of 1e-5 are found without printing the number.
    let scaled = (f64::from(v) * 1e5).round();
    let near = scaled / 1e5;
    if scaled.abs() < 1e15 && near as f32 == v { near } else { v.to_string().parse().unwrap_or(f64::from(v)) }
}

/// Whole numbers, [`NO_FRAME`] where missing.
pub(crate) fn wholes(arrays: &[ArrayRef], stored: Stored, out: &mut Vec<i64>) -> Result<(), Misfit> {
    out.clear();
    match stored {
        Stored::Int32 => each_number!(arrays, Int32Type, |v: Option<i32>| out.push(v.map_or(NO_FRAME, i64::from))),
        Stored::UInt32 => each_number!(arrays, UInt32Type, |v: Option<u32>| out.push(v.map_or(NO_FRAME, i64::from))),
        Stored::Int64 => {
            each_number!(arrays, Int64Type, |v: Option<i64>| out.push(v.unwrap_or(NO_FRAME)));
            let beyond = |v: &i64| *v != NO_FRAME && v.unsigned_abs() > FURTHEST_FRAME as u64;
            if let Some(row) = out.iter().position(beyond) {
                return Err((row, out[row].to_string()));
            }
        }
        _ => {
            let mut numbers = Vec::new();
            reals(arrays, stored, &mut numbers)?;
            for (row, v) in numbers.iter().enumerate() {
                match *v {
                    v if v.is_nan() => out.push(NO_FRAME),
                    v if v == v.trunc() && v.abs() <= FURTHEST_FRAME as f64 => out.push(v as i64),
                    v => return Err((row, v.to_string())),
                }
            }
        }
    }
    Ok(())
}

/// Times in microseconds, [`NO_TIME`] where missing.
pub(crate) fn times(arrays: &[ArrayRef], stored: Stored, form: Option<TimeForm>, out: &mut Vec<i64>) -> Result<(), Misfit> {
    out.clear();
    let counted = |v: i64, per_s: f64| {
        let us = if per_s > 1e6 { v.div_euclid(1000) } else { v.saturating_mul((1e6 / per_s) as i64) };
        if us.unsigned_abs() < FURTHEST_US as u64 { us } else { NO_TIME }
    };
    match stored {
        Stored::Time64(per_s) => each_number!(arrays, Int64Type, |v: Option<i64>| out.push(v.map_or(NO_TIME, |v| counted(v, per_s)))),
        Stored::Stamp96 => each_number!(arrays, Int64Type, |v: Option<i64>| out.push(v.map_or(NO_TIME, |v| counted(v, 1e9)))),
        Stored::Time32(per_s) => {
            each_number!(arrays, Int32Type, |v: Option<i32>| out.push(v.map_or(NO_TIME, |v| counted(i64::from(v), per_s))))
        }
        Stored::Text => {
            return each_text(arrays, |row, text| match time_us(text.unwrap_or_default().as_bytes(), form) {
                Ok(us) => {
                    out.push(us);
                    Ok(())
                }
                Err(()) => Err((row, text.unwrap_or_default().to_string())),
            });
        }
        _ => {
            let mut numbers = Vec::new();
            reals(arrays, stored, &mut numbers)?;
            for (row, v) in numbers.iter().enumerate() {
                out.push(if v.is_nan() { NO_TIME } else { of_number(*v, form).map_err(|()| (row, v.to_string()))? });
            }
        }
    }
    Ok(())
}

/// Codes of a text column or of whole numbers taken as ids, [`NONE`] where missing.
pub(crate) fn codes(arrays: &[ArrayRef], stored: Stored, coder: &mut ColumnCoder, texts: &mut Texts, is_id: bool, out: &mut Vec<u32>) {
    out.clear();
    match stored {
        Stored::Int32 | Stored::Date | Stored::Time32(_) => {
            each_number!(arrays, Int32Type, |v: Option<i32>| out.push(whole(v.map(i64::from), coder, texts)))
        }
        Stored::UInt32 => each_number!(arrays, UInt32Type, |v: Option<u32>| out.push(whole(v.map(i64::from), coder, texts))),
        Stored::Int64 | Stored::Time64(_) | Stored::Stamp96 => {
            each_number!(arrays, Int64Type, |v: Option<i64>| out.push(whole(v, coder, texts)))
        }
        Stored::UInt64 => each_number!(arrays, UInt64Type, |v: Option<u64>| out.push(match v.map(i64::try_from) {
            Some(Err(_)) => texts.code(&v.unwrap_or_default().to_string()),
            other => whole(other.and_then(Result::ok), coder, texts),
        })),
        Stored::Float32 | Stored::Float64 => {
            let mut numbers = Vec::new();
            if reals(arrays, stored, &mut numbers).is_ok() {
                for v in numbers {
                    out.push(match v {
                        v if v.is_nan() => NONE,
                        v if v == v.trunc() && v.abs() <= FURTHEST_FRAME as f64 => whole(Some(v as i64), coder, texts),
                        v => texts.code(&v.to_string()),
                    });
                }
            }
        }
        Stored::Truth => {
            for array in arrays {
                let Some(array) = array.as_any().downcast_ref::<ArrayOf<BooleanType>>() else { continue };
                out.extend(array.iter().map(|v| v.map_or(NONE, |v| texts.code(if v { "true" } else { "false" }))));
            }
        }
        Stored::Text => {
            for chunk in arrays {
                let Some(array) = chunk.as_any().downcast_ref::<ArrayOf<StringType>>() else { continue };
                // Equal texts of an array nearly always have equal views: one comparison of 16 bytes instead of a text's.
                let mut by_view: Coder<u128> = Coder::default();
                let nulls = chunk.validity().filter(|v| v.unset_bits() > 0);
                for (i, view) in array.views().iter().enumerate() {
                    if nulls.is_some_and(|v| !v.get_bit(i)) {
                        out.push(NONE);
                        continue;
                    }
                    let code: Result<u32, Infallible> = by_view.code(
                        &view.as_u128(),
                        |view| *view,
                        |_| {
                            let resolve = |raw: &[u8]| {
                                let text = std::str::from_utf8(raw).unwrap_or_default();
                                Ok(if is_id { texts.id_code(text) } else { texts.code(text.trim()) })
                            };
                            coder.bytes.code(array.value(i).as_bytes(), |raw| raw.into(), resolve)
                        },
                    );
                    match code {
                        Ok(code) => out.push(code),
                    }
                }
            }
        }
    }
}

/// Code of a whole number taken as an id.
#[inline]
fn whole(v: Option<i64>, coder: &mut ColumnCoder, texts: &mut Texts) -> u32 {
    let Some(v) = v else { return NONE };
    let code: Result<u32, Infallible> = coder.whole.code(&v, |v| *v, |v| Ok(texts.code(&v.to_string())));
    match code {
        Ok(code) => code,
    }
}

fn each_text(arrays: &[ArrayRef], mut each: impl FnMut(usize, Option<&str>) -> Result<(), Misfit>) -> Result<(), Misfit> {
    let mut row = 0;
    for array in arrays {
        let Some(array) = array.as_any().downcast_ref::<ArrayOf<StringType>>() else { continue };
        for text in array.iter() {
            each(row, text)?;
            row += 1;
        }
    }
    Ok(())
}
