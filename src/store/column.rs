//! A column in memory, between row structs and Parquet.

/// What a column holds.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Kind {
    Text,
    Number,
    Whole,
    Truth,
}

impl Kind {
    /// The kind in words, for messages and the data dictionary.
    pub fn word(self) -> &'static str {
        match self {
            Kind::Text => "text",
            Kind::Number => "number",
            Kind::Whole => "whole number",
            Kind::Truth => "true or false",
        }
    }
}

/// The values of one column; missing stays missing.
#[derive(Clone, Debug, PartialEq)]
pub enum Column {
    Text(Vec<Option<String>>),
    Number(Vec<Option<f64>>),
    Whole(Vec<Option<i64>>),
    Truth(Vec<Option<bool>>),
}

/// A type that can stand in a row.
pub trait Cell: Sized {
    const KIND: Kind;
    /// Whether a value may be missing.
    const OPTIONAL: bool;
    fn collect<'a>(values: impl Iterator<Item = &'a Self>) -> Column
    where
        Self: 'a;
    /// Hands over the values with the numbers of their rows; nothing for a missing one that must be there, or of another kind.
    fn each(column: Column, put: impl FnMut(usize, Self));
}

macro_rules! cell {
    ($ty:ty, $kind:ident) => {
        impl Cell for $ty {
            const KIND: Kind = Kind::$kind;
            const OPTIONAL: bool = false;
            fn collect<'a>(values: impl Iterator<Item = &'a Self>) -> Column {
                Column::$kind(values.map(|v| Some(v.clone())).collect())
            }
            fn each(column: Column, mut put: impl FnMut(usize, Self)) {
                if let Column::$kind(values) = column {
                    values.into_iter().enumerate().for_each(|(row, value)| value.into_iter().for_each(|value| put(row, value)));
                }
            }
        }
        impl Cell for Option<$ty> {
            const KIND: Kind = Kind::$kind;
            const OPTIONAL: bool = true;
            fn collect<'a>(values: impl Iterator<Item = &'a Self>) -> Column {
                Column::$kind(values.cloned().collect())
            }
            fn each(column: Column, mut put: impl FnMut(usize, Self)) {
                if let Column::$kind(values) = column {
                    values.into_iter().enumerate().for_each(|(row, value)| put(row, value));
                }
            }
        }
    };
}

cell!(String, Text);
cell!(f64, Number);
cell!(i64, Whole);
cell!(bool, Truth);
