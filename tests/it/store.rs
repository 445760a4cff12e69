//! The audit's files on disk.

#[path = "store/folder.rs"]
mod folder;
#[path = "store/tables.rs"]
mod tables;

use tailchase::store::{GameMark, PursuitRow};

fn pursuit(game: &str, number: i64) -> PursuitRow {
    PursuitRow {
        game: game.to_string(),
        play: "7".to_string(),
        carry: 1,
        pursuit: number,
        carrier: "82.0".to_string(),
        defender: "D'Arx-Ö. 2".to_string(),
        defender_name: (number % 2 == 0).then(|| "Ann \"Quill\", jr.\nof the north".to_string()),
        start_s: 0.1 + 0.2,
        ending: "stop".to_string(),
        conceded_yd: (number != 2).then_some(-1.0 / 3.0),
        chance_lost_frame: (number == 3).then_some(i64::MIN),
        charged: number == 1,
        ..PursuitRow::default()
    }
}

fn pursuits(game: &str, count: i64) -> Vec<PursuitRow> {
    (1..=count).map(|n| pursuit(game, n)).collect()
}

fn mark(game: &str) -> GameMark {
    GameMark { game: game.to_string(), made_with: "a".to_string(), inputs: vec!["h1".to_string()], ..GameMark::default() }
}

fn message(error: &dyn std::error::Error) -> String {
    let mut text = error.to_string();
    let mut at = error.source();
    while let Some(cause) = at {
        text = format!("{text}: {cause}");
        at = cause.source();
    }
    text
}
