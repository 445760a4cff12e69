//! Texts as small numbers: rows carry codes, the texts are kept once.

use super::number::is_missing;
use std::borrow::Borrow;
use std::collections::HashMap;
use std::hash::Hash;
use std::sync::Arc;

/// The code of "no text".
pub(crate) const NONE: u32 = 0;

/// All texts seen, by code. Ids and other texts share it, so that equal texts have equal codes.
#[derive(Debug)]
pub(crate) struct Texts {
    texts: Vec<Arc<str>>,
    codes: HashMap<Arc<str>, u32>,
}

impl Default for Texts {
    fn default() -> Texts {
        Texts { texts: vec![Arc::from("")], codes: HashMap::new() }
    }
}

impl Texts {
    pub fn code(&mut self, text: &str) -> u32 {
        if is_missing(text.as_bytes()) {
            return NONE;
        }
        if let Some(code) = self.codes.get(text) {
            return *code;
        }
        let shared: Arc<str> = Arc::from(text);
        let code = self.texts.len() as u32;
        self.texts.push(Arc::clone(&shared));
        self.codes.insert(shared, code);
        code
    }

    /// Code of an id: `82.0` and `82` are one.
    pub fn id_code(&mut self, text: &str) -> u32 {
        self.code(plain_id(text))
    }

    pub fn all(&self) -> &[Arc<str>] {
        &self.texts
    }
}

/// An id without the `.0` that a float column leaves behind.
pub(crate) fn plain_id(text: &str) -> &str {
    let text = text.trim();
    let Some((whole, zeros)) = text.split_once('.') else { return text };
    let digits = whole.strip_prefix('-').unwrap_or(whole);
    let is_whole = !digits.is_empty() && digits.bytes().all(|b| b.is_ascii_digit());
    if is_whole && !zeros.is_empty() && zeros.bytes().all(|b| b == b'0') { whole } else { text }
}

#[derive(Debug)]
struct Slot<K> {
    raw: K,
    code: u32,
    next: u32,
}

/// Codes of one column's raw values. Files are sorted somehow, so each value remembers which one followed it the
/// last time, and is tried first: a comparison instead of a hash.
#[derive(Debug)]
pub(crate) struct Coder<K> {
    slots: Vec<Slot<K>>,
    by_raw: HashMap<K, u32>,
    last: u32,
}

impl<K> Default for Coder<K> {
    fn default() -> Coder<K> {
        Coder { slots: Vec::new(), by_raw: HashMap::new(), last: 0 }
    }
}

impl<K: Eq + Hash + Clone> Coder<K> {
    #[inline]
    pub fn code<Q, E>(&mut self, raw: &Q, own: impl FnOnce(&Q) -> K, resolve: impl FnOnce(&Q) -> Result<u32, E>) -> Result<u32, E>
    where
        K: Borrow<Q>,
        Q: Eq + Hash + ?Sized,
    {
        if let Some(last) = self.slots.get(self.last as usize) {
            let next = last.next;
            let slot = &self.slots[next as usize];
            if slot.raw.borrow() == raw {
                self.last = next;
                return Ok(slot.code);
            }
        }
        self.look_up(raw, own, resolve)
    }

    #[inline(never)]
    fn look_up<Q, E>(&mut self, raw: &Q, own: impl FnOnce(&Q) -> K, resolve: impl FnOnce(&Q) -> Result<u32, E>) -> Result<u32, E>
    where
        K: Borrow<Q>,
        Q: Eq + Hash + ?Sized,
    {
        let at = match self.by_raw.get(raw) {
            Some(at) => *at,
            None => {
                let code = resolve(raw)?;
                let at = self.slots.len() as u32;
                let key = own(raw);
                self.slots.push(Slot { raw: key.clone(), code, next: at });
                self.by_raw.insert(key, at);
                at
            }
        };
        let last = self.last as usize;
        self.slots[last].next = at;
        self.last = at;
        Ok(self.slots[at as usize].code)
    }
}

/// What a row says about its mover: codes of name, side, position and jersey.
pub(crate) type Attribute = [u32; 4];

/// The distinct attributes, by number; a mover's last one is tried first.
#[derive(Debug, Default)]
pub(crate) struct Attributes {
    all: Vec<Attribute>,
    numbers: HashMap<Attribute, u32>,
    last_of_mover: Vec<u32>,
}

impl Attributes {
    #[inline]
    pub fn number(&mut self, mover: u32, attribute: Attribute) -> u32 {
        if let Some(last) = self.last_of_mover.get(mover as usize)
            && self.all.get(*last as usize) == Some(&attribute)
        {
            return *last;
        }
        let next = self.all.len() as u32;
        let number = *self.numbers.entry(attribute).or_insert(next);
        if number == next {
            self.all.push(attribute);
        }
        if self.last_of_mover.len() <= mover as usize {
            self.last_of_mover.resize(mover as usize + 1, u32::MAX);
        }
        self.last_of_mover[mover as usize] = number;
        number
    }

    pub fn all(&self) -> &[Attribute] {
        &self.all
    }
}
