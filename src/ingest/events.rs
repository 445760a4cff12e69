//! Event texts to marks: a table of plain words.

use super::naming::normal;
use crate::model::EventMark;

/// The words that a mapping file uses for marks.
pub const WORDS: [(&str, EventMark); 21] = [
    ("snap", EventMark::Snap),
    ("hand_off", EventMark::HandOff),
    ("pass_thrown", EventMark::PassThrown),
    ("pass_arrived", EventMark::PassArrived),
    ("catch", EventMark::Catch),
    ("incomplete", EventMark::Incomplete),
    ("interception", EventMark::Interception),
    ("lateral", EventMark::Lateral),
    ("kick", EventMark::Kick),
    ("kick_received", EventMark::KickReceived),
    ("fair_catch", EventMark::FairCatch),
    ("touchback", EventMark::Touchback),
    ("fumble", EventMark::Fumble),
    ("recovery", EventMark::Recovery),
    ("first_contact", EventMark::FirstContact),
    ("down", EventMark::Down),
    ("out_of_bounds", EventMark::OutOfBounds),
    ("score", EventMark::Score),
    ("slide", EventMark::Slide),
    ("sack", EventMark::Sack),
    ("other", EventMark::Other),
];

/// The mark that a mapping file's word stands for.
///
/// ```
/// use tailchase::{ingest::events::mark_of_word, model::EventMark};
/// assert_eq!(mark_of_word("hand off"), Some(EventMark::HandOff));
/// ```
pub fn mark_of_word(word: &str) -> Option<EventMark> {
    let word = normal(word);
    WORDS.iter().find(|(w, _)| normal(w) == word).map(|(_, mark)| *mark)
}

/// The word for a mark.
pub fn word_of_mark(mark: EventMark) -> &'static str {
    WORDS.iter().find(|(_, m)| *m == mark).map_or("other", |(word, _)| word)
}

/// The mark that an event text stands for; `None` for a text without a meaning here.
///
/// ```
/// use tailchase::{ingest::events::mark_of_text, model::EventMark};
/// assert_eq!(mark_of_text("Ball Snap"), Some(EventMark::Snap));
/// assert_eq!(mark_of_text("pass_outcome_caught"), Some(EventMark::Catch));
/// assert_eq!(mark_of_text("band_plays"), None);
/// ```
pub fn mark_of_text(text: &str) -> Option<EventMark> {
    let text = normal(text);
    by_table(&text).or_else(|| ["passoutcome", "outcome", "event"].iter().find_map(|lead| by_table(text.strip_prefix(lead)?)))
}

fn by_table(text: &str) -> Option<EventMark> {
    use EventMark::*;
    Some(match text {
        "snap" | "ballsnap" | "snapped" | "snapdirect" | "directsnap" => Snap,
        "handoff" | "handedoff" | "handoffgiven" => HandOff,
        "passthrown" | "passforward" | "forwardpass" | "pass" | "throw" | "thrown" | "passrelease" | "passreleased" | "shovelpass"
        | "passshovel" => PassThrown,
        "passarrived" | "passarrives" | "arrived" => PassArrived,
        "catch" | "caught" | "passcaught" | "passcatch" | "complete" | "passcomplete" | "completion" | "reception" | "touchdowncatch" => {
            Catch
        }
        "incomplete" | "passincomplete" | "incompletion" | "passdropped" | "dropped" => Incomplete,
        "interception" | "intercepted" | "passintercepted" | "passinterception" => Interception,
        "lateral" | "passlateral" | "lateralpass" | "backwardpass" | "passbackward" | "pitch" | "toss" => Lateral,
        "kick" | "kicked" | "kickoff" | "punt" | "punted" | "onsidekick" | "kickoffonside" | "freekick" | "dropkick" | "fieldgoal"
        | "fieldgoalattempt" | "extrapoint" | "extrapointattempt" => Kick,
        "kickreceived" | "puntreceived" | "kickoffreceived" | "kickcaught" | "puntcaught" | "kickoffcaught" | "kickreturned" => {
            KickReceived
        }
        "faircatch" | "faircaught" => FairCatch,
        "touchback" => Touchback,
        "fumble" | "fumbled" | "muff" | "muffed" | "puntmuffed" | "kickmuffed" | "ballloose" => Fumble,
        "recovery"
        | "recovered"
        | "fumblerecovered"
        | "fumblerecovery"
        | "ballrecovered"
        | "fumbleoffenserecovered"
        | "fumbledefenserecovered"
        | "looseballrecovered" => Recovery,
        "firstcontact" | "contact" => FirstContact,
        "down" | "downed" | "tackle" | "tackled" | "playerdown" | "carrierdown" | "ballcarrierdown" | "kneedown" | "kneel" | "qbkneel" => {
            Down
        }
        "outofbounds" | "out" | "oob" | "ranoutofbounds" | "steppedout" | "pushedoutofbounds" => OutOfBounds,
        "score" | "scored" | "touchdown" | "td" | "safety" => Score,
        "slide" | "slid" | "qbslide" => Slide,
        "sack" | "sacked" | "qbsack" => Sack,
        "other" | "lineset" | "shift" | "motion" | "maninmotion" | "huddle" | "huddlestart" | "huddlebreak" | "huddlebreakoffense"
        | "playaction" | "fake" | "tipped" | "passtipped" | "timeout" | "penalty" | "penaltyflag" | "flag" | "whistle" | "run"
        | "dropback" => Other,
        _ => return None,
    })
}
