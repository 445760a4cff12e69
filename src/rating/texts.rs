//! Ids, names and other texts that come again and again, each kept once.

use std::collections::HashMap;
use std::num::NonZeroU32;
use std::sync::Arc;

/// Stands for a text; a missing one takes no room beside it.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord, Hash)]
pub struct Code(NonZeroU32);

impl Code {
    fn place(self) -> usize {
        self.0.get() as usize - 1
    }
}

/// The texts by code. Codes follow the order of arrival: they may tell texts apart, never order them.
#[derive(Clone, Debug, Default)]
pub struct Texts {
    codes: HashMap<Arc<str>, Code>,
    texts: Vec<Arc<str>>,
}

impl Texts {
    /// The code of a text, a new one where it is new.
    pub fn code(&mut self, text: &str) -> Code {
        if let Some(code) = self.codes.get(text) {
            return *code;
        }
        let code = Code(NonZeroU32::MIN.saturating_add(self.texts.len() as u32));
        let text: Arc<str> = Arc::from(text);
        self.texts.push(Arc::clone(&text));
        self.codes.insert(text, code);
        code
    }

    /// For each code of `more`, in order, the code of its text here.
    pub fn codes_of(&mut self, more: &Texts) -> Recoding {
        Recoding(more.texts.iter().map(|text| self.code(text)).collect())
    }

    /// The text of a code that [`Texts::code`] gave.
    pub fn text(&self, code: Code) -> &str {
        &self.texts[code.place()]
    }
}

/// From the codes of one [`Texts`] to those of another.
pub struct Recoding(Vec<Code>);

impl Recoding {
    pub fn of(&self, code: Code) -> Code {
        self.0[code.place()]
    }

    pub fn of_some(&self, code: Option<Code>) -> Option<Code> {
        code.map(|code| self.of(code))
    }
}
