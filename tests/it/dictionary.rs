//! The schema is a contract: its names, and the data dictionary that is written from it.

use std::collections::BTreeSet;
use std::path::Path;
use tailchase::store::{CarryRow, FrameRow, PlayerRow, PursuitRow, Row, SetAsideRow, TeamRow, dictionary_markdown};

/// Columns of the pursuits table that other programs may rely on.
const PURSUITS: &str = "game play carry pursuit carrier carrier_name defender defender_name defender_side position \
    start_frame end_frame start_s end_s ending start_range_yd closest_yd speed_ratio closing_median_yps \
    line_rate_median_degps on_course_share miss_median_yd lean_deg ideal_s ideal_x_yd ideal_y_yd met_s met_x_yd met_y_yd \
    top_speed_yps need_start_yps need_peak_yps chance_start chance_lost_s break_s contact_angle_deg contact_side \
    contact_closing_yps efficiency conceded_yd late_yd flat_yd deep_yd pace_yd block_yd move_yd after_contact_yd \
    steer_n steer_k_per_s steer_delay_s steer_word";

/// Columns of the carries table that other programs may rely on.
const CARRIES: &str = "game play carry carrier carrier_name start_frame end_frame start_how end_how confidence \
    start_x_yd end_x_yd gain_yd stopped_by conceded_yd";

fn assert_has<R: Row>(contract: &str) {
    let there: BTreeSet<&str> = R::COLUMNS.iter().map(|c| c.name).collect();
    let missing: Vec<&str> = contract.split_whitespace().filter(|name| !there.contains(name)).collect();
    assert!(missing.is_empty(), "{} lacks {missing:?}", R::TABLE);
}

#[test]
fn the_contract_columns_are_there() {
    assert_eq!((PURSUITS.split_whitespace().count(), CARRIES.split_whitespace().count()), (51, 15), "the contract only grows");
    assert_has::<PursuitRow>(PURSUITS);
    assert_has::<CarryRow>(CARRIES);
}

fn assert_well_named<R: Row>() {
    let mut seen = BTreeSet::new();
    for doc in R::COLUMNS {
        let plain = doc.name.chars().all(|c| c.is_ascii_lowercase() || c.is_ascii_digit() || c == '_');
        assert!(plain && seen.insert(doc.name), "{}: {}", R::TABLE, doc.name);
        assert!(doc.meaning.len() >= 3 && !doc.meaning.ends_with('.'), "{}: {}", R::TABLE, doc.name);
    }
    let columns = R::to_columns(&[R::default(), R::default()]);
    assert_eq!(columns.len(), R::COLUMNS.len());
}

#[test]
fn columns_are_snake_case_once_each_and_explained() {
    assert_well_named::<PursuitRow>();
    assert_well_named::<CarryRow>();
    assert_well_named::<FrameRow>();
    assert_well_named::<PlayerRow>();
    assert_well_named::<TeamRow>();
    assert_well_named::<SetAsideRow>();
}

#[test]
fn the_dictionary_says_what_the_schema_says() {
    let path = Path::new(env!("CARGO_MANIFEST_DIR")).join("src/store/DICTIONARY.md");
    let written = dictionary_markdown();
    if std::env::var_os("TAILCHASE_ACCEPT").is_some() {
        std::fs::write(&path, &written).unwrap();
    }
    let stored = std::fs::read_to_string(&path).unwrap_or_default();
    assert!(
        stored == written,
        "src/store/DICTIONARY.md is behind the schema: run the tests once with TAILCHASE_ACCEPT=1 and read the change"
    );
}
