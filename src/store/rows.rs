//! The tables' rows and their schema: one macro call a table gives the row, its columns and their meaning.

use super::column::{Cell, Column, Kind};

/// Name, kind and meaning of a column, and whether a value may be missing.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub struct ColumnDoc {
    pub name: &'static str,
    pub kind: Kind,
    pub optional: bool,
    pub meaning: &'static str,
}

/// A row type with a fixed schema.
pub trait Row: Sized + Default {
    const TABLE: &'static str;
    const COLUMNS: &'static [ColumnDoc];
    /// The rows as columns, in the order of [`Row::COLUMNS`].
    fn to_columns(rows: &[Self]) -> Vec<Column>;
    /// Rows from columns in the order of [`Row::COLUMNS`], all of one length; `None` for one that the table lacks.
    fn from_columns(columns: Vec<Option<Column>>, rows: usize) -> Vec<Self>;
}

macro_rules! table {
    ($(#[$doc:meta])* $row:ident, $table:literal { $($name:ident : $ty:ty, $meaning:literal;)* }) => {
        $(#[$doc])*
        #[derive(Clone, Debug, Default, PartialEq, serde::Serialize)]
        pub struct $row { $(#[doc = $meaning] pub $name: $ty,)* }
        impl Row for $row {
            const TABLE: &'static str = $table;
            const COLUMNS: &'static [ColumnDoc] = &[$(ColumnDoc {
                name: stringify!($name),
                kind: <$ty as Cell>::KIND,
                optional: <$ty as Cell>::OPTIONAL,
                meaning: $meaning,
            },)*];
            fn to_columns(rows: &[Self]) -> Vec<Column> {
                vec![$(<$ty as Cell>::collect(rows.iter().map(|r| &r.$name)),)*]
            }
            fn from_columns(columns: Vec<Option<Column>>, rows: usize) -> Vec<Self> {
                let mut out: Vec<Self> = (0..rows).map(|_| Self::default()).collect();
                let mut at = columns.into_iter();
                $(if let Some(Some(column)) = at.next() {
                    <$ty as Cell>::each(column, |row, value| {
                        if let Some(row) = out.get_mut(row) { row.$name = value; }
                    });
                })*
                out
            }
        }
    };
}

table! {
    /// One pursuit: every measure, the account, the ending.
    PursuitRow, "pursuits" {
        game: String, "game id, as given";
        play: String, "play id, as given";
        carry: i64, "carry, counted from 1 within the play";
        pursuit: i64, "pursuit, counted from 1 within the play";
        carrier: String, "id of the ball carrier";
        carrier_name: Option<String>, "his name, where the file says";
        defender: String, "id of the defender";
        defender_name: Option<String>, "his name, where the file says";
        defender_side: Option<String>, "his club or home/away label, as given";
        position: Option<String>, "his position, as given";
        play_kind: Option<String>, "kind of play, where the file says";
        start_frame: i64, "frame at which the pursuit starts, as in the file";
        end_frame: i64, "frame at which it ends, as in the file";
        start_s: f64, "start, seconds from the play's first frame";
        end_s: f64, "end, seconds from the play's first frame";
        ending: String, "stop, contact_lost, chance_lost, no_chance, out_of_it, or covered: he still had his chance when a team-mate made the stop";
        start_range_yd: f64, "gap between the two centres at the start";
        start_bearing_deg: f64, "bearing of the defender seen from the carrier at the start, 0 straight downfield, left positive";
        closest_yd: f64, "smallest gap";
        speed_ratio: Option<f64>, "median of defender's speed over carrier's, as run";
        capability_ratio: Option<f64>, "defender's top speed over carrier's";
        carrier_speed_yps: f64, "carrier's median speed";
        closing_median_yps: f64, "median closing speed; positive while the gap shrinks";
        line_rate_median_degps: f64, "median turn rate of the line of sight, counter-clockwise positive";
        line_rate_sigma_degps: Option<f64>, "median standard error of that rate";
        steady_share: Option<f64>, "share of frames whose line rate cannot be told from zero";
        on_course_share: f64, "share of frames with a predicted miss inside the reach";
        miss_median_yd: f64, "median predicted miss, unsigned";
        lean_deg: Option<f64>, "mean heading error against the foresight line, deep positive, flat negative";
        head_turn_median_degps: Option<f64>, "median rate of the carrier's bearing relative to the defender's heading";
        triangle_s: Option<f64>, "triangle intercept when the account starts, at his speed then: seconds; null when it cannot be had";
        triangle_lead_deg: Option<f64>, "lead angle of that intercept from the line of sight";
        sideline_s: Option<f64>, "tightest line when the account starts, at his top speed: earliest meeting with the carrier on his line and up the sideline, seconds";
        sideline_x_yd: Option<f64>, "tightest line: spot along the field";
        sideline_y_yd: Option<f64>, "tightest line: spot across the field";
        safest_x_yd: Option<f64>, "safest line: spot along the field with the largest arrival margin";
        safest_y_yd: Option<f64>, "safest line: spot across the field";
        safest_margin_s: Option<f64>, "safest line: arrival margin";
        ideal_s: Option<f64>, "hindsight intercept at the start for his top speed: seconds after it";
        ideal_x_yd: Option<f64>, "hindsight intercept: spot along the field, carrier attacking +x";
        ideal_y_yd: Option<f64>, "hindsight intercept: spot across the field";
        foresight_s: Option<f64>, "foresight intercept at the start: seconds after it";
        foresight_x_yd: Option<f64>, "foresight intercept: spot along the field";
        foresight_y_yd: Option<f64>, "foresight intercept: spot across the field";
        met_s: f64, "seconds after the start at which it really ended";
        met_x_yd: f64, "carrier's spot there, along the field";
        met_y_yd: f64, "carrier's spot there, across the field";
        top_speed_yps: f64, "his top speed as the model has it";
        top_speed_sigma_yps: f64, "standard error of it";
        need_start_yps: Option<f64>, "speed needed at the start; null when no speed would do";
        need_peak_yps: Option<f64>, "highest speed needed while the play was on";
        chance_start: f64, "chance at the start, 0..1";
        chance_lost_s: Option<f64>, "seconds after the start at which the last chance went; null if it never did";
        chance_lost_frame: Option<i64>, "that frame, as in the file";
        chance_lost_need_yps: Option<f64>, "speed he would have needed just after it";
        clock_s: Option<f64>, "seconds after the start at which the account starts";
        break_s: Option<f64>, "seconds after the start at which he broke on the ball";
        contact_angle_deg: Option<f64>, "tackling angle: 0 head-on, 180 from behind; null without contact";
        contact_side: Option<String>, "inside or outside; null without contact";
        contact_closing_yps: Option<f64>, "closing speed over the last 0.3 s before contact";
        efficiency: Option<f64>, "pursuit efficiency, 0..1; null where there is nothing to judge";
        account_x_yd: Option<f64>, "expected meeting spot, along the field, when the account starts";
        conceded_yd: Option<f64>, "yards conceded: where it ended less account_x_yd; null without an account";
        late_yd: Option<f64>, "of these: late break";
        flat_yd: Option<f64>, "of these: line too flat";
        deep_yd: Option<f64>, "of these: line too deep";
        pace_yd: Option<f64>, "of these: less than full push";
        block_yd: Option<f64>, "of these: held by a blocker";
        move_yd: Option<f64>, "of these: the carrier's own move, which could not be foreseen";
        after_contact_yd: Option<f64>, "ground between a lost contact and the carry's end; not in the sum";
        steer_n: Option<f64>, "steering law: gain N on the line rate";
        steer_k_per_s: Option<f64>, "steering law: gain K on the deviation angle";
        steer_delay_s: Option<f64>, "steering law: delay";
        steer_word: Option<String>, "runs at the man, mixed or leads; null where it cannot be told";
        charged: bool, "whether the account is charged to him: he had a chance and was not out of it";
        film_s: Option<f64>, "second of the film at which the pursuit starts, where a film table says";
    }
}

/// A row type with some of another one's columns, so that reading it reads those alone; made from the whole row too.
macro_rules! narrow {
    ($(#[$doc:meta])* $row:ident of $whole:ident, $table:literal { $($name:ident : $ty:ty;)* }) => {
        table! { $(#[$doc])* $row, $table { $($name: $ty, "as in the whole row";)* } }
        impl From<&$whole> for $row {
            fn from(whole: &$whole) -> $row {
                $row { $($name: whole.$name.clone(),)* }
            }
        }
    };
}

narrow! {
    /// What rankings and clip lists read of a pursuit: under half of its columns.
    BriefRow of PursuitRow, "pursuits" {
        game: String;
        play: String;
        carry: i64;
        pursuit: i64;
        carrier: String;
        carrier_name: Option<String>;
        defender: String;
        defender_name: Option<String>;
        defender_side: Option<String>;
        position: Option<String>;
        play_kind: Option<String>;
        start_frame: i64;
        start_s: f64;
        end_s: f64;
        ending: String;
        start_range_yd: f64;
        start_bearing_deg: f64;
        capability_ratio: Option<f64>;
        carrier_speed_yps: f64;
        closing_median_yps: f64;
        line_rate_median_degps: f64;
        on_course_share: f64;
        lean_deg: Option<f64>;
        top_speed_yps: f64;
        chance_lost_s: Option<f64>;
        efficiency: Option<f64>;
        conceded_yd: Option<f64>;
        late_yd: Option<f64>;
        flat_yd: Option<f64>;
        deep_yd: Option<f64>;
        pace_yd: Option<f64>;
        block_yd: Option<f64>;
        move_yd: Option<f64>;
        steer_n: Option<f64>;
        steer_k_per_s: Option<f64>;
        charged: bool;
        film_s: Option<f64>;
    }
}

table! {
    /// One carry.
    CarryRow, "carries" {
        game: String, "game id, as given";
        play: String, "play id, as given";
        carry: i64, "carry, counted from 1 within the play";
        carrier: String, "id of the ball carrier";
        carrier_name: Option<String>, "his name, where the file says";
        carrier_side: Option<String>, "his club or home/away label";
        start_frame: i64, "first frame, as in the file";
        end_frame: i64, "last frame, as in the file";
        start_s: f64, "start, seconds from the play's first frame";
        end_s: f64, "end, seconds from the play's first frame";
        start_how: String, "how the start was known";
        end_how: String, "how the end was known";
        confidence: f64, "confidence in the carrier, 0..1";
        attack: String, "direction of attack in the file's own axes: plus_x or minus_x";
        start_x_yd: f64, "spot at the start, along the field, carrier attacking +x";
        end_x_yd: f64, "spot at the end, along the field";
        gain_yd: f64, "end less start";
        stopped_by: Option<String>, "defender or defenders in contact at a stop, ids joined by a semicolon";
        conceded_yd: Option<f64>, "ground beyond the earliest intercept that any defender had";
    }
}

table! {
    /// One frame of one pursuit.
    FrameRow, "frames" {
        game: String, "game id, as given";
        play: String, "play id, as given";
        carry: i64, "carry";
        pursuit: i64, "pursuit";
        defender: String, "id of the defender";
        frame: i64, "frame, as in the file";
        time_s: f64, "seconds from the play's first frame";
        carrier_x_yd: f64, "carrier, along the field, attacking +x";
        carrier_y_yd: f64, "carrier, across the field";
        defender_x_yd: f64, "defender, along the field";
        defender_y_yd: f64, "defender, across the field";
        carrier_speed_yps: f64, "carrier's speed";
        defender_speed_yps: f64, "defender's speed";
        range_yd: f64, "gap";
        bearing_deg: Option<f64>, "bearing of the carrier from the defender, counter-clockwise from +x; null in the same place";
        bearing_sigma_deg: Option<f64>, "standard error of the bearing";
        line_rate_degps: Option<f64>, "turn rate of the line of sight";
        line_rate_sigma_degps: Option<f64>, "standard error of it";
        closing_yps: Option<f64>, "closing speed";
        closing_sigma_yps: Option<f64>, "standard error of it";
        miss_yd: Option<f64>, "predicted miss if both hold course, signed: positive when the carrier passes to the left";
        miss_sigma_yd: Option<f64>, "standard error of it";
        cpa_s: Option<f64>, "time to the closest point of approach";
        steady: bool, "line rate not distinguishable from zero, or predicted miss inside the reach";
        on_course: bool, "predicted miss inside the reach and still ahead";
        drift: Option<String>, "flat (bearing drifts ahead, he falls behind) or deep (he leads too much); null when steady";
        head_turn_degps: Option<f64>, "rate of the carrier's bearing relative to the defender's heading";
        need_yps: Option<f64>, "speed needed from here";
        t_star_s: Option<f64>, "time left to the hindsight intercept at top speed";
        chance: f64, "chance of meeting him before the path ends";
        expected_x_yd: f64, "expected meeting spot J";
        push: Option<f64>, "push really used, share of full";
        blocked: bool, "held by a blocker";
        late_yd: Option<f64>, "charged in the step that starts here: late break";
        flat_yd: Option<f64>, "flat line";
        deep_yd: Option<f64>, "deep line";
        pace_yd: Option<f64>, "pace";
        block_yd: Option<f64>, "block";
        move_yd: Option<f64>, "carrier's move";
    }
}

table! {
    /// One player's season: raw and shrunken figures with their intervals.
    PlayerRow, "players" {
        rank: i64, "rank by shrunken, adjusted own yards per chance, 1 the best";
        rank_low: i64, "lower end of the rank's interval";
        rank_high: i64, "upper end of the rank's interval";
        player: String, "player id";
        name: Option<String>, "name, where the file says";
        side: Option<String>, "club or home/away label";
        position: Option<String>, "position, as given";
        games: i64, "games with a pursuit";
        pursuits: i64, "pursuits listed";
        chances: i64, "pursuits charged: he had a chance and was not out of it";
        stops: i64, "stops";
        contacts_lost: i64, "contacts lost";
        chances_lost: i64, "chances lost";
        too_few: bool, "fewer chances than the setting asks for";
        efficiency_raw: Option<f64>, "mean pursuit efficiency";
        efficiency_se: Option<f64>, "its standard error, clustered by game";
        efficiency: Option<f64>, "the same, shrunken";
        efficiency_low: Option<f64>, "lower end of its interval";
        efficiency_high: Option<f64>, "upper end of its interval";
        own_raw_yd: Option<f64>, "own yards (late, flat, deep, pace) per chance, plain mean";
        own_se_yd: Option<f64>, "its standard error, clustered by game";
        own_shrunk_yd: Option<f64>, "the same, shrunken, not adjusted";
        own_yd: Option<f64>, "shrunken and adjusted for the situation";
        own_low_yd: Option<f64>, "lower end of its interval";
        own_high_yd: Option<f64>, "upper end of its interval";
        conceded_yd: Option<f64>, "yards conceded per chance, all headings";
        late_yd: Option<f64>, "per chance: late break";
        flat_yd: Option<f64>, "per chance: flat line";
        deep_yd: Option<f64>, "per chance: deep line";
        pace_yd: Option<f64>, "per chance: pace";
        block_yd: Option<f64>, "per chance: block";
        move_yd: Option<f64>, "per chance: the carrier's move";
        on_course_share: Option<f64>, "mean share of frames on course";
        lean_deg: Option<f64>, "circular mean of the lean, deep positive, flat negative";
        line_rate_degps: Option<f64>, "mean of the median unsigned line rate";
        closing_yps: Option<f64>, "mean closing speed";
        top_speed_yps: Option<f64>, "top speed as the model has it, mean over games";
        steer_n: Option<f64>, "steering law pooled: N";
        steer_k_per_s: Option<f64>, "steering law pooled: K";
        steer_word: Option<String>, "runs at the man, mixed or leads; null where it cannot be told";
        rank_swing: Option<i64>, "largest move of the rank over the settings tried, where a sensitivity run was made";
    }
}

table! {
    /// One side's defence, for comparing opponents.
    TeamRow, "teams" {
        rank: i64, "rank by own yards per chance";
        side: String, "club or home/away label";
        players: i64, "players with a chance";
        chances: i64, "chances";
        stops: i64, "stops";
        chances_lost: i64, "chances lost";
        efficiency: Option<f64>, "mean pursuit efficiency";
        own_yd: Option<f64>, "own yards per chance";
        own_low_yd: Option<f64>, "lower end of its interval, clustered by game";
        own_high_yd: Option<f64>, "upper end of its interval";
        late_yd: Option<f64>, "per chance: late break";
        flat_yd: Option<f64>, "per chance: flat line";
        deep_yd: Option<f64>, "per chance: deep line";
        pace_yd: Option<f64>, "per chance: pace";
        block_yd: Option<f64>, "per chance: block";
        move_yd: Option<f64>, "per chance: the carrier's move";
    }
}

table! {
    /// One row of the input that was not used.
    SetAsideRow, "set_aside" {
        file: String, "input file, as given";
        row: i64, "row in it, the first data row being 1";
        reason: String, "why it was not used";
    }
}
