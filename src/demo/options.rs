//! What a season of invented games shall be like.

/// Rates that make sense, frames a second.
const RATES_HZ: (f64, f64) = (1.0, 200.0);

/// Options of the generator. `Default` is one game of 60 plays at 10 Hz with 5 cm of noise.
#[derive(Clone, Debug, PartialEq)]
pub struct DemoOptions {
    pub games: usize,
    pub plays_per_game: usize,
    pub rate_hz: f64,
    /// Standard deviation of the noise on each coordinate, yards.
    pub noise_yd: f64,
    pub seed: u64,
    /// Whether the rows carry event texts.
    pub events: bool,
    /// Whether the rows name the carrier.
    pub carrier_column: bool,
    /// Whether the plays table says which way the side with the ball attacks.
    pub direction_column: bool,
    /// Threads that generate games; changes nothing in the files.
    pub threads: usize,
}

impl Default for DemoOptions {
    fn default() -> Self {
        DemoOptions {
            games: 1,
            plays_per_game: 60,
            rate_hz: 10.0,
            noise_yd: 0.05,
            seed: 1,
            events: true,
            carrier_column: false,
            direction_column: false,
            threads: 1,
        }
    }
}

/// Why options cannot be used.
#[derive(Clone, Debug, PartialEq, thiserror::Error)]
pub enum OptionError {
    #[error("games: expected 1 or more, found 0 (ask for at least one)")]
    NoGames,
    #[error("plays per game: expected 1 or more, found 0 (ask for at least one)")]
    NoPlays,
    #[error("rate: expected 1 to 200 Hz, found {0} Hz (10 is usual)")]
    Rate(f64),
    #[error("noise: expected 0 to 2 yd, found {0} yd (0.05 is usual)")]
    Noise(f64),
}

impl DemoOptions {
    /// # Errors
    /// The first option that cannot be used.
    pub fn check(&self) -> Result<(), OptionError> {
        if self.games == 0 {
            return Err(OptionError::NoGames);
        }
        if self.plays_per_game == 0 {
            return Err(OptionError::NoPlays);
        }
        if !(self.rate_hz >= RATES_HZ.0 && self.rate_hz <= RATES_HZ.1) {
            return Err(OptionError::Rate(self.rate_hz));
        }
        if !(self.noise_yd >= 0.0 && self.noise_yd <= 2.0) {
            return Err(OptionError::Noise(self.noise_yd));
        }
        Ok(())
    }
}
