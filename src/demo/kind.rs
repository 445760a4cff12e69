//! The kinds of invented plays and their shares.

use crate::base::Stream;

/// What sort of play it is.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord, Hash)]
pub enum PlayKind {
    RunInside,
    RunOutside,
    RunCutBack,
    ShortCatch,
    DeepCatch,
    Incomplete,
    Scramble,
    KickReturn,
    PuntReturn,
    InterceptionReturn,
    FumbleReturn,
    Lateral,
}

impl PlayKind {
    /// Every kind with its share of the plays. Own choice, near what is usual in the professional game.
    pub const SHARES: [(PlayKind, f64); 12] = [
        (PlayKind::RunInside, 0.16),
        (PlayKind::RunOutside, 0.16),
        (PlayKind::RunCutBack, 0.09),
        (PlayKind::ShortCatch, 0.24),
        (PlayKind::DeepCatch, 0.09),
        (PlayKind::Incomplete, 0.06),
        (PlayKind::Scramble, 0.04),
        (PlayKind::KickReturn, 0.06),
        (PlayKind::PuntReturn, 0.04),
        (PlayKind::InterceptionReturn, 0.025),
        (PlayKind::FumbleReturn, 0.02),
        (PlayKind::Lateral, 0.015),
    ];

    pub fn drawn(stream: &mut Stream) -> PlayKind {
        let mut left = stream.uniform();
        for (kind, share) in PlayKind::SHARES {
            left -= share;
            if left < 0.0 {
                return kind;
            }
        }
        PlayKind::RunInside
    }

    /// The word used in the plays table.
    pub fn word(self) -> &'static str {
        match self {
            PlayKind::RunInside => "run_inside",
            PlayKind::RunOutside => "run_outside",
            PlayKind::RunCutBack => "run_cut_back",
            PlayKind::ShortCatch => "short_catch",
            PlayKind::DeepCatch => "deep_catch",
            PlayKind::Incomplete => "incomplete",
            PlayKind::Scramble => "scramble",
            PlayKind::KickReturn => "kick_return",
            PlayKind::PuntReturn => "punt_return",
            PlayKind::InterceptionReturn => "interception_return",
            PlayKind::FumbleReturn => "fumble_return",
            PlayKind::Lateral => "lateral",
        }
    }
}
