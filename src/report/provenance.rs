//! What a report says about its own making: version, inputs, row account, findings.

/// One file that was read.
#[derive(Clone, Debug, Default, PartialEq, Eq)]
pub struct InputFile {
    pub path: String,
    pub bytes: u64,
    pub hash: String,
}

/// One kind of oddity in the data.
#[derive(Clone, Debug, Default, PartialEq, Eq)]
pub struct FindingLine {
    pub kind: String,
    pub count: u64,
    pub first_place: String,
    pub advice: String,
}

/// Everything that a reader needs to judge where the numbers come from. No clock time: the same input gives
/// the same page.
#[derive(Clone, Debug, Default, PartialEq)]
pub struct Provenance {
    pub version: String,
    pub inputs: Vec<InputFile>,
    /// Which settings differ from the defaults, in words.
    pub settings_note: String,
    pub rows_read: u64,
    pub rows_used: u64,
    pub rows_set_aside: u64,
    pub games: u64,
    pub plays: u64,
    pub carries: u64,
    pub pursuits: u64,
    pub findings: Vec<FindingLine>,
    /// Share of frames in which a player out-did the motion model.
    pub beyond_model_share: Option<f64>,
}
