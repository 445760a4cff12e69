//! The invented ball: at rest, in somebody's hands, in flight, or loose on the ground.

use crate::base::V2;

/// Drag of a ball that rolls, 1/s. Own choice.
const ROLL_DRAG_PER_S: f64 = 1.6;

/// Where a ball in flight comes down.
#[derive(Clone, Copy, Debug)]
pub enum Landing {
    /// In the hands of an actor, wherever he then is.
    Hands(usize),
    /// On a spot.
    Spot(V2),
}

#[derive(Clone, Copy, Debug)]
pub enum BallState {
    Rest(V2),
    Held(usize),
    Flight { from_yd: V2, to: Landing, start_s: f64, end_s: f64 },
    Loose { from_yd: V2, vel_yps: V2, since_s: f64 },
}

/// The ball and where it sits in the hands that hold it.
#[derive(Clone, Copy, Debug)]
pub struct Ball {
    pub state: BallState,
    /// From the holder's centre to the ball, yards.
    pub grip_yd: V2,
}

impl Ball {
    pub fn resting(spot_yd: V2) -> Ball {
        Ball { state: BallState::Rest(spot_yd), grip_yd: V2::new(0.3, 0.0) }
    }

    /// The ball's place at `time_s`; `hands` gives an actor's place at that time.
    #[inline]
    pub fn place(&self, time_s: f64, hands: impl Fn(usize) -> V2) -> V2 {
        match self.state {
            BallState::Rest(spot_yd) => spot_yd,
            BallState::Held(actor) => hands(actor) + self.grip_yd,
            BallState::Flight { from_yd, to, start_s, end_s } => {
                let share = ((time_s - start_s) / (end_s - start_s)).clamp(0.0, 1.0);
                let goal_yd = match to {
                    Landing::Hands(actor) => hands(actor) + self.grip_yd,
                    Landing::Spot(spot_yd) => spot_yd,
                };
                from_yd.lerp(goal_yd, share)
            }
            BallState::Loose { from_yd, vel_yps, since_s } => {
                let coast_s = (1.0 - (-ROLL_DRAG_PER_S * (time_s - since_s)).exp()) / ROLL_DRAG_PER_S;
                from_yd + vel_yps * coast_s
            }
        }
    }

    /// The ball after a half turn of the field whose far corner is `corner_yd`.
    pub fn turned(&self, corner_yd: V2) -> Ball {
        let state = match self.state {
            BallState::Rest(spot) => BallState::Rest(corner_yd - spot),
            BallState::Held(actor) => BallState::Held(actor),
            BallState::Flight { from_yd, to, start_s, end_s } => {
                let to = match to {
                    Landing::Spot(spot) => Landing::Spot(corner_yd - spot),
                    hands @ Landing::Hands(_) => hands,
                };
                BallState::Flight { from_yd: corner_yd - from_yd, to, start_s, end_s }
            }
            BallState::Loose { from_yd, vel_yps, since_s } => BallState::Loose { from_yd: corner_yd - from_yd, vel_yps: -vel_yps, since_s },
        };
        Ball { state, grip_yd: -self.grip_yd }
    }
}
