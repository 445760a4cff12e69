//! The clock: from when on there is something to chase.

use crate::base::V2;
use crate::model::settings::ClockSettings;

/// Index of the first frame of the account: the carrier moves downfield at the set speed for the set time, plus the
/// reaction allowance. `vel_yps` is the carrier's, turned so that he attacks +x; `t_s` the frames' times.
///
/// No result for a carrier who never gets going: such a carry has no accounts.
pub fn clock_frame(t_s: &[f64], vel_yps: &[V2], settings: &ClockSettings) -> Option<usize> {
    // A hair below the setting, so that three steps of a tenth count as 0.3 s.
    const HAIR_S: f64 = 1e-6;
    let mut since: Option<usize> = None;
    for (i, vel) in vel_yps.iter().enumerate() {
        if vel.x < settings.downfield_yps {
            since = None;
            continue;
        }
        let start = *since.get_or_insert(i);
        if t_s[i] - t_s[start] + HAIR_S >= settings.sustained_s {
            let begins_s = t_s[start] + settings.reaction_s - HAIR_S;
            return (start..t_s.len()).find(|k| t_s[*k] >= begins_s);
        }
    }
    None
}
