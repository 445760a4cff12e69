//! Position groups from the position text of a file: common codes and plain words.

/// Players who are asked for the same kind of running.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord, Hash)]
pub enum Group {
    Cornerback,
    Safety,
    Linebacker,
    End,
    Tackle,
    Receiver,
    Back,
    TightEnd,
    Quarterback,
    OffensiveLine,
    Kicker,
}

impl Group {
    pub fn word(self) -> &'static str {
        match self {
            Group::Cornerback => "cornerback",
            Group::Safety => "safety",
            Group::Linebacker => "linebacker",
            Group::End => "end",
            Group::Tackle => "tackle",
            Group::Receiver => "receiver",
            Group::Back => "back",
            Group::TightEnd => "tight end",
            Group::Quarterback => "quarterback",
            Group::OffensiveLine => "offensive line",
            Group::Kicker => "kicker",
        }
    }

    /// The group of a position text, whatever its case, spaces and hyphens; none for one that is not known or says no group
    /// (`DB` may be a cornerback or a safety, `DL` an end or a tackle).
    ///
    /// ```
    /// use tailchase::model::Group;
    /// assert_eq!(Group::of("FS"), Some(Group::Safety));
    /// assert_eq!(Group::of("Outside Linebacker"), Some(Group::Linebacker));
    /// assert_eq!(Group::of("left-wing"), None);
    /// ```
    pub fn of(position: &str) -> Option<Group> {
        let code: String = position.chars().filter(|c| c.is_alphanumeric()).flat_map(char::to_uppercase).collect();
        Some(match code.as_str() {
            "CB" | "LCB" | "RCB" | "NB" | "NCB" | "SCB" | "CORNER" | "CORNERBACK" | "NICKEL" | "NICKELBACK" => Group::Cornerback,
            "S" | "FS" | "SS" | "SAF" | "SAFETY" | "FREESAFETY" | "STRONGSAFETY" => Group::Safety,
            "LB" | "ILB" | "OLB" | "MLB" | "WLB" | "SLB" | "LILB" | "RILB" | "LOLB" | "ROLB" | "WILL" | "MIKE" | "SAM" | "LINEBACKER"
            | "INSIDELINEBACKER" | "OUTSIDELINEBACKER" | "MIDDLELINEBACKER" => Group::Linebacker,
            "DE" | "LDE" | "RDE" | "EDGE" | "END" | "DEFENSIVEEND" | "DEFENCEEND" => Group::End,
            "DT" | "LDT" | "RDT" | "NT" | "NG" | "NOSETACKLE" | "NOSEGUARD" | "DEFENSIVETACKLE" => Group::Tackle,
            "WR" | "LWR" | "RWR" | "SWR" | "FL" | "SE" | "RECEIVER" | "WIDERECEIVER" => Group::Receiver,
            "RB" | "HB" | "TB" | "FB" | "RUNNINGBACK" | "HALFBACK" | "FULLBACK" | "TAILBACK" => Group::Back,
            "TE" | "TIGHTEND" => Group::TightEnd,
            "QB" | "QUARTERBACK" => Group::Quarterback,
            "C" | "G" | "LG" | "RG" | "OG" | "OT" | "LT" | "RT" | "OL" | "OFFENSIVELINE" | "OFFENSIVETACKLE" | "OFFENSIVEGUARD"
            | "GUARD" | "CENTER" | "CENTRE" => Group::OffensiveLine,
            "K" | "P" | "PK" | "LS" | "KICKER" | "PUNTER" | "LONGSNAPPER" => Group::Kicker,
            _ => return None,
        })
    }
}
