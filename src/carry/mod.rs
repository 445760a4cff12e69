//! Who has the ball from when to when, and who goes after him.
//!
//! A play goes in with its coarse tracks, its carries come out ([`find_carries`]); with the smoothed tracks of
//! a carry's frames come the pursuits ([`find_pursuits`]). Three sources tell of a carry, best first: a carrier
//! named by the file (`named`), event marks (`marks`), the ball's way alone (`holds`, `by_ball`).
//!
//! A carry starts at the frame in which possession is gained: at the hand-off, the catch, the reception, the
//! recovery, or, for the player who took the snap, where his run across the line of scrimmage begins.

mod attack;
mod blocks;
mod by_ball;
mod contact;
mod ends;
mod find;
mod holds;
mod live;
mod marks;
mod named;
mod possession;
mod pursuits;
mod scene;
mod unseen;

pub use attack::attack_of;
pub use find::find_carries;
pub use pursuits::{contacts, find_pursuits, stoppers};
