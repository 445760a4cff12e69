//! What the program speaks about: field, movers, plays, clean tracks, carries, pursuits, settings, findings.

pub mod carry;
pub mod event;
pub mod field;
pub mod finding;
pub mod play;
pub mod position;
pub mod settings;
pub mod track;

pub use carry::{Carry, CarryEnd, CarryStart, Contact, Ending, Pursuit, SideOfRunner};
pub use event::EventMark;
pub use field::Field;
pub use finding::{Finding, FindingKind, Findings};
pub use play::{Attack, Mover, Play, PlayHints, RawTrack, SetAside, SourceRow};
pub use position::Group;
pub use settings::Settings;
pub use track::{Cov, MoverTrack, Noise, Track};
