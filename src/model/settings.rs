//! Every setting with its unit, default and source. Printed by `tailchase settings`, read from TOML.

use super::Field;
use serde::{Deserialize, Serialize};

macro_rules! settings {
    ($(#[$gdoc:meta])* $group:ident { $($name:ident : $ty:ty = $default:expr, $unit:literal, $doc:literal;)* }) => {
        $(#[$gdoc])*
        #[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
        #[serde(default, deny_unknown_fields)]
        pub struct $group { $(#[doc = $doc] #[doc = concat!("Unit: ", $unit, ".")] pub $name: $ty,)* }
        impl Default for $group {
            fn default() -> Self { $group { $($name: $default,)* } }
        }
        impl $group {
            /// (name, unit, meaning and source) of each setting, in order.
            pub const DOC: &'static [(&'static str, &'static str, &'static str)] = &[$((stringify!($name), $unit, $doc),)*];
        }
    };
}

settings! {
    /// The playing surface.
    FieldSettings {
        length_yd: f64 = Field::AMERICAN.length_yd, "yd", "length between the back lines; American 120, Canadian 150";
        width_yd: f64 = Field::AMERICAN.width_yd, "yd", "width between the sidelines; American 160/3, Canadian 65";
        end_zone_yd: f64 = Field::AMERICAN.end_zone_yd, "yd", "depth of an end zone; 0 for a field without goal lines";
    }
}
settings! {
    /// Cleaning and smoothing.
    SmoothingSettings {
        jump_speed_yps: f64 = 14.0, "yd/s", "implied speed above which a place counts as a jump; beyond the fastest sprints on record (13.6 yd/s, Berlin 2009)";
        gate_sigmas: f64 = 5.0, "sigmas", "innovation beyond which the filter counts a place as a jump";
        bridge_s: f64 = 0.5, "s", "longest gap that is bridged; a longer one splits the track";
        jerk_density: f64 = 0.0, "yd2/s5", "white-noise jerk density q of the smoother; 0 means estimated per game by maximum likelihood";
        sigma_yd: f64 = 0.0, "yd", "measurement noise of a coordinate; 0 means estimated per game by maximum likelihood";
        contact_boost: f64 = 7.0, "factor", "by how much the jerk density rises within 0.1 s of a contact, so that the blow is not smeared backwards; own choice: error and error bars on invented games at 5 to 50 Hz";
    }
}
settings! {
    /// Finding carries and pursuits.
    CarrySettings {
        reach_yd: f64 = 1.25, "yd", "gap between the centres of carrier and defender that counts as contact; own choice";
        stop_within_s: f64 = 1.0, "s", "time after contact within which the carrier must be down or out for a stop";
        hold_ball_yd: f64 = 1.5, "yd", "distance within which a player can have the ball, when only the ball's track tells";
        hold_time_s: f64 = 0.3, "s", "time for which he must have it";
        down_speed_yps: f64 = 1.5, "yd/s", "speed below which a carrier with an opponent in reach counts as stopped, when no mark tells";
        block_range_yd: f64 = 1.5, "yd", "distance within which an opponent can block a defender";
        block_sector_deg: f64 = 60.0, "deg", "half width of the sector around the defender's way in which a blocker stands";
        block_time_s: f64 = 0.3, "s", "time for which the relative speed must be small";
        block_relative_speed_yps: f64 = 1.5, "yd/s", "relative speed that counts as small; own choice";
        out_of_it_share: f64 = 0.5, "share", "share of blocked frames beyond which a pursuit is out of it";
    }
}
settings! {
    /// The reach model.
    MotionSettings {
        alpha_per_s: f64 = 1.30, "1/s", "drag rate: sprint time constant 0.768 s (Clark et al. 2019), 1.3 in Fujimura & Sugihara 2005";
        top_speed_sigma_share: f64 = 0.03, "share", "spread of a top speed's estimate, where nothing better is known";
        top_speed_quantile: f64 = 0.99, "share", "quantile of a player's smoothed speeds that is read as his top speed";
        top_speed_scale: f64 = 1.0, "factor", "on every top speed; for trying how much hangs on it";
        top_speed_prior_s: f64 = 3.0, "s", "weight of the position group's top speed, in seconds of running; own choice";
        foresight_pull: f64 = 0.5, "share", "how far a carrier is expected to bend downfield (fitted on open tracking data)";
        foresight_pace: f64 = 0.9, "share", "share of his top speed at which a carrier is expected to go on";
        sideline_margin_yd: f64 = 1.0, "yd", "distance from the sideline at which a carrier is expected to turn up along it";
        constant_velocity: bool = false, "yes/no", "foresight by constant velocity, for the textbook cases";
        foresight_s: f64 = 8.0, "s", "how far ahead the foreseeable path is looked at";
    }
}
settings! {
    /// When an account starts, and when a defender has broken on the ball.
    ClockSettings {
        downfield_yps: f64 = 3.0, "yd/s", "downfield speed of the carrier at which there is something to chase";
        sustained_s: f64 = 0.3, "s", "time for which he must have it";
        reaction_s: f64 = 0.3, "s", "allowance for reacting";
        break_window_s: f64 = 0.3, "s", "window over which the push is averaged";
        break_push_share: f64 = 0.5, "share", "mean push in the window that counts as having broken on the ball";
        break_sector_deg: f64 = 45.0, "deg", "by how much the sector from the carrier to the meeting point is widened";
    }
}
settings! {
    /// Rankings.
    RatingSettings {
        too_few: u32 = 8, "pursuits", "below this number of chances a player is marked too few";
        draws: u32 = 4000, "draws", "posterior draws for rank intervals";
        seed: u64 = 20, "seed", "seed of the draws";
        level: f64 = 0.95, "share", "level of all intervals";
    }
}

/// All settings.
#[derive(Clone, Debug, Default, PartialEq, Serialize, Deserialize)]
#[serde(default, deny_unknown_fields)]
pub struct Settings {
    pub field: FieldSettings,
    pub smoothing: SmoothingSettings,
    pub carry: CarrySettings,
    pub motion: MotionSettings,
    pub clock: ClockSettings,
    pub rating: RatingSettings,
}

/// A group of documented settings: its name and (setting, unit, meaning and source).
pub type SettingGroup = (&'static str, &'static [(&'static str, &'static str, &'static str)]);

impl Settings {
    pub const GROUPS: &'static [SettingGroup] = &[
        ("field", FieldSettings::DOC),
        ("smoothing", SmoothingSettings::DOC),
        ("carry", CarrySettings::DOC),
        ("motion", MotionSettings::DOC),
        ("clock", ClockSettings::DOC),
        ("rating", RatingSettings::DOC),
    ];

    pub fn field(&self) -> Field {
        Field { length_yd: self.field.length_yd, width_yd: self.field.width_yd, end_zone_yd: self.field.end_zone_yd }
    }
}
