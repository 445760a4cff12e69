//! Position groups.

/// Position group of a position's usual abbreviation or name; common practice, no source.
pub fn position_group(position: &str) -> Option<&'static str> {
    let word: String = position.chars().filter(char::is_ascii_alphabetic).collect::<String>().to_ascii_uppercase();
    Some(match word.as_str() {
        "CB" | "DB" | "NB" | "CORNERBACK" | "CORNER" | "NICKEL" => "cornerback",
        "S" | "FS" | "SS" | "SAF" | "SAFETY" | "FREESAFETY" | "STRONGSAFETY" => "safety",
        "LB" | "ILB" | "OLB" | "MLB" | "WLB" | "SLB" | "LINEBACKER" => "linebacker",
        "DE" | "EDGE" | "DEFENSIVEEND" | "END" => "defensive_end",
        "DT" | "NT" | "DL" | "IDL" | "DEFENSIVETACKLE" | "NOSETACKLE" | "DEFENSIVELINE" => "defensive_tackle",
        "WR" | "RECEIVER" | "WIDERECEIVER" | "PR" | "KR" => "receiver",
        "RB" | "HB" | "FB" | "TB" | "BACK" | "RUNNINGBACK" | "FULLBACK" => "back",
        "TE" | "TIGHTEND" => "tight_end",
        "QB" | "QUARTERBACK" => "quarterback",
        "C" | "G" | "T" | "OL" | "OT" | "OG" | "LT" | "RT" | "LG" | "RG" | "LS" | "CENTER" | "CENTRE" | "GUARD" | "TACKLE"
        | "OFFENSIVELINE" => "offensive_line",
        _ => return None,
    })
}
