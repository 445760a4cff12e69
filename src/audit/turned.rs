//! Coordinates turned so that the carrier attacks +x: once, where a carry's states are taken out of the tracks.

use crate::base::V2;
use crate::engine::reach::State;
use crate::model::{Attack, Field, Track};

/// States of frames `from..=to` of a track, turned for the direction of attack. The track must cover them.
pub fn turned_states(track: &Track, from: usize, to: usize, attack: Attack, field: &Field) -> Vec<State> {
    (from..=to)
        .map(|f| match attack {
            Attack::TowardsPlusX => State { pos_yd: track.pos(f), vel_yps: track.vel(f) },
            Attack::TowardsMinusX => State { pos_yd: field.turned(track.pos(f)), vel_yps: -track.vel(f) },
        })
        .collect()
}

/// A vector (an acceleration, say) turned in the same way.
pub fn turned_vector(v: V2, attack: Attack) -> V2 {
    match attack {
        Attack::TowardsPlusX => v,
        Attack::TowardsMinusX => -v,
    }
}
