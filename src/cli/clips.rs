//! `tailchase clips`: the moments to cut from the film.

use super::print::print;
use super::rank::Choice;
use super::typed::FormatWord;
use super::{CliError, Outcome};
use crate::model::Ending;
use crate::report::{ClipFilter, ClipOrder, ClipPicker, Heading, clips_table};
use crate::store::{BriefRow, read_audit_info};
use clap::{Args, ValueEnum};
use std::path::PathBuf;

/// List the moments to cut from the film: game, play, from, to, and why
///
/// Seconds are those of the film where the audit was given a film table, else counted from the play's first frame; the clock
/// column says which. A clip starts 2 s before the pursuit and ends 1.5 s after it.
#[derive(Debug, Args)]
#[command(after_long_help = "Example:\n  tailchase clips reports/season --player 52 --top 5 --format csv")]
pub struct ClipsArgs {
    /// Folder of an audit
    #[arg(value_name = "OUT")]
    pub out: PathBuf,
    /// Only this defender: id or name
    #[arg(long, value_name = "PLAYER")]
    pub player: Option<String>,
    /// Only this club or home/away label
    #[arg(long, value_name = "SIDE")]
    pub side: Option<String>,
    /// Only this game
    #[arg(long, value_name = "GAME")]
    pub game: Option<String>,
    /// Only pursuits that ended so
    #[arg(long, value_enum)]
    pub ending: Option<EndingWord>,
    /// Only yards lost under this heading
    #[arg(long, value_enum)]
    pub heading: Option<HeadingWord>,
    /// Leave out what cost fewer yards
    #[arg(long, value_name = "YARDS", allow_negative_numbers = true)]
    pub min_yards: Option<f64>,
    #[arg(long, value_enum, default_value_t)]
    pub order: OrderWord,
    /// At most this many
    #[arg(long, value_name = "N")]
    pub top: Option<usize>,
    #[arg(long, value_enum, default_value_t)]
    pub format: FormatWord,
}

#[derive(Clone, Copy, Debug, PartialEq, Eq, ValueEnum)]
pub enum EndingWord {
    Stop,
    ContactLost,
    ChanceLost,
    NoChance,
    OutOfIt,
    Covered,
}

#[derive(Clone, Copy, Debug, PartialEq, Eq, ValueEnum)]
pub enum HeadingWord {
    Late,
    Flat,
    Deep,
    Pace,
    Block,
    Move,
}

#[derive(Clone, Copy, Debug, Default, PartialEq, Eq, ValueEnum)]
pub enum OrderWord {
    /// Most yards first
    #[default]
    Costliest,
    /// Fewest yards first: good work to show
    Best,
    /// As the film runs
    Film,
}

fn filter(typed: &ClipsArgs) -> ClipFilter {
    ClipFilter {
        player: typed.player.clone(),
        side: typed.side.clone(),
        game: typed.game.clone(),
        ending: typed.ending.map(|word| match word {
            EndingWord::Stop => Ending::Stop,
            EndingWord::ContactLost => Ending::ContactLost,
            EndingWord::ChanceLost => Ending::ChanceLost,
            EndingWord::NoChance => Ending::NoChance,
            EndingWord::OutOfIt => Ending::OutOfIt,
            EndingWord::Covered => Ending::Covered,
        }),
        heading: typed.heading.map(|word| match word {
            HeadingWord::Late => Heading::Late,
            HeadingWord::Flat => Heading::Flat,
            HeadingWord::Deep => Heading::Deep,
            HeadingWord::Pace => Heading::Pace,
            HeadingWord::Block => Heading::Block,
            HeadingWord::Move => Heading::Move,
        }),
        min_yards: typed.min_yards,
        order: match typed.order {
            OrderWord::Costliest => ClipOrder::CostliestFirst,
            OrderWord::Best => ClipOrder::BestFirst,
            OrderWord::Film => ClipOrder::FilmOrder,
        },
        limit: typed.top,
    }
}

pub fn run(typed: &ClipsArgs) -> Result<Outcome, CliError> {
    read_audit_info(&typed.out)?;
    let choice = Choice { side: typed.side.clone(), game: typed.game.clone(), ..Choice::default() };
    let want = filter(typed);
    let mut picker = ClipPicker::new(&want);
    let of_game = |rows: &[BriefRow]| {
        let mut picker = ClipPicker::new(&want);
        picker.see(rows);
        picker
    };
    choice.each_game(&typed.out, of_game, |game| picker.merge(game))?;
    print(&clips_table(&picker.clips(), typed.format.into()))?;
    Ok(Outcome::Clean)
}
