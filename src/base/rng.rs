//! Seeded random streams: one stream per unit of work, so that the order of work cannot change a draw.
//!
//! SplitMix64 (Steele, Lea & Flood 2014) over a counter; the unit's name is hashed into the start
//! with FNV-1a. Not for secrets.

/// A stream of random numbers, fixed by a seed and the name of the unit that draws.
///
/// ```
/// use tailchase::base::Stream;
/// let mut a = Stream::new(7, "game 3");
/// let mut b = Stream::new(7, "game 3");
/// assert_eq!(a.uniform(), b.uniform());
/// ```
#[derive(Clone, Debug)]
pub struct Stream {
    state: u64,
}

impl Stream {
    pub fn new(seed: u64, unit: &str) -> Stream {
        let mut hash = 0xcbf2_9ce4_8422_2325_u64;
        for byte in unit.bytes() {
            hash = (hash ^ u64::from(byte)).wrapping_mul(0x0100_0000_01b3);
        }
        let mut stream = Stream { state: hash ^ seed.wrapping_mul(0x9e37_79b9_7f4a_7c15) };
        stream.next_u64();
        stream
    }

    #[inline]
    pub fn next_u64(&mut self) -> u64 {
        self.state = self.state.wrapping_add(0x9e37_79b9_7f4a_7c15);
        let mut z = self.state;
        z = (z ^ (z >> 30)).wrapping_mul(0xbf58_476d_1ce4_e5b9);
        z = (z ^ (z >> 27)).wrapping_mul(0x94d0_49bb_1331_11eb);
        z ^ (z >> 31)
    }

    /// Uniform in [0, 1).
    #[inline]
    pub fn uniform(&mut self) -> f64 {
        (self.next_u64() >> 11) as f64 * (1.0 / (1_u64 << 53) as f64)
    }

    /// Uniform in [low, high).
    #[inline]
    pub fn between(&mut self, low: f64, high: f64) -> f64 {
        low + (high - low) * self.uniform()
    }

    /// Uniform index below `n`; `n` must not be 0.
    #[inline]
    pub fn below(&mut self, n: usize) -> usize {
        ((self.uniform() * n as f64) as usize).min(n - 1)
    }

    #[inline]
    pub fn chance(&mut self, p: f64) -> bool {
        self.uniform() < p
    }

    /// Standard normal (Box & Muller 1958, the cosine half).
    #[inline]
    pub fn normal(&mut self) -> f64 {
        let u = 1.0 - self.uniform();
        let v = self.uniform();
        (-2.0 * u.ln()).sqrt() * (std::f64::consts::TAU * v).cos()
    }
}
