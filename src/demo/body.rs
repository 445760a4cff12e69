//! How an invented athlete moves: bounded push against linear drag, legs that follow the will with a lag.
//!
//! dv/dt = α (V u − v), |u| ≤ 1 (Fujimura & Sugihara 2005), solved exactly over every step in which the
//! push u is held. The push itself follows the will with a first-order lag, so that nobody turns at once.

use crate::base::V2;

/// Drag rate of every invented athlete, 1/s (Fujimura & Sugihara 2005).
pub const ALPHA_PER_S: f64 = 1.3;
/// Time constant with which the legs follow the will, s. Own choice.
pub const LEG_LAG_S: f64 = 0.1;
/// Length of one step of the simulation, s.
pub const STEP_S: f64 = 0.02;

/// The factors of one step, computed once.
#[derive(Clone, Copy, Debug)]
pub struct Law {
    pub step_s: f64,
    decay: f64,
    glide_s: f64,
    legs: f64,
}

impl Law {
    /// The law for steps of `step_s` seconds.
    pub fn new(step_s: f64) -> Law {
        let decay = (-ALPHA_PER_S * step_s).exp();
        Law { step_s, decay, glide_s: (1.0 - decay) / ALPHA_PER_S, legs: 1.0 - (-step_s / LEG_LAG_S).exp() }
    }
}

/// Place, velocity and push of one athlete.
#[derive(Clone, Copy, Debug, Default)]
pub struct Body {
    pub pos_yd: V2,
    pub vel_yps: V2,
    /// What the legs do, |push| ≤ 1.
    pub push: V2,
    /// What the head wants, |will| ≤ 1.
    pub will: V2,
    pub top_speed_yps: f64,
}

impl Body {
    pub fn standing(pos_yd: V2, top_speed_yps: f64) -> Body {
        Body { pos_yd, top_speed_yps, ..Body::default() }
    }

    /// Sets the will, cut to length one.
    #[inline]
    pub fn want(&mut self, will: V2) {
        self.will = clipped(will, 1.0);
    }

    /// Will and legs at once: a blow, not a decision.
    #[inline]
    pub fn jolt(&mut self, push: V2) {
        self.want(push);
        self.push = self.will;
    }

    /// Lets the legs follow the will for one step. Call before [`Body::advance`].
    #[inline]
    pub fn follow(&mut self, law: &Law) {
        self.push += (self.will - self.push) * law.legs;
    }

    /// One exact step with the push held.
    #[inline]
    pub fn advance(&mut self, law: &Law) {
        (self.pos_yd, self.vel_yps) = self.glide(law);
    }

    /// Place and velocity after `tau_s` seconds with the present push held.
    pub fn after(&self, tau_s: f64) -> (V2, V2) {
        self.glide(&Law::new(tau_s))
    }

    #[inline]
    fn glide(&self, law: &Law) -> (V2, V2) {
        let cruise = self.push * self.top_speed_yps;
        let pos = self.pos_yd + self.vel_yps * law.glide_s + cruise * (law.step_s - law.glide_s);
        (pos, self.vel_yps * law.decay + cruise * (1.0 - law.decay))
    }

    /// The will that brings the velocity towards `wanted_yps`.
    #[inline]
    pub fn steer(&self, wanted_yps: V2) -> V2 {
        clipped((wanted_yps + (wanted_yps - self.vel_yps) * 0.6) / self.top_speed_yps, 1.0)
    }

    /// The will that runs to a spot that moves with `spot_vel_yps`, and stays with it; `pace` is a share of top speed.
    pub fn seek(&self, spot_yd: V2, spot_vel_yps: V2, pace: f64) -> V2 {
        let closing = clipped((spot_yd - self.pos_yd) * 2.0, pace * self.top_speed_yps);
        self.steer(clipped(closing + spot_vel_yps, pace * self.top_speed_yps))
    }

    /// The will that brings him to a stand; `force` 1 brakes as hard as he can.
    #[inline]
    pub fn brake(&self, force: f64) -> V2 {
        clipped(-self.vel_yps * (3.0 / self.top_speed_yps), 1.0) * force
    }

    /// The state after a half turn of the field whose far corner is `corner_yd`.
    pub fn turned(&self, corner_yd: V2) -> Body {
        Body { pos_yd: corner_yd - self.pos_yd, vel_yps: -self.vel_yps, push: -self.push, will: -self.will, ..*self }
    }
}

/// The vector, shortened to `longest` where it is longer.
#[inline]
pub fn clipped(v: V2, longest: f64) -> V2 {
    let n2 = v.norm2();
    if n2 <= longest * longest { v } else { v * (longest / n2.sqrt()) }
}
