//! What counts as a chance, and what it cost by his own doing.

use crate::store::rows::BriefRow;

/// The headings of an account, in yards.
#[derive(Clone, Copy, Debug, Default, PartialEq)]
pub struct Account {
    pub conceded_yd: f64,
    pub late_yd: f64,
    pub flat_yd: f64,
    pub deep_yd: f64,
    pub pace_yd: f64,
    pub block_yd: f64,
    pub move_yd: f64,
}

impl Account {
    /// The account of a charged pursuit; none when it is not charged, or when a heading is missing or not finite.
    pub fn of(row: &BriefRow) -> Option<Account> {
        if !row.charged {
            return None;
        }
        let finite = |v: Option<f64>| v.filter(|v| v.is_finite());
        Some(Account {
            conceded_yd: finite(row.conceded_yd)?,
            late_yd: finite(row.late_yd)?,
            flat_yd: finite(row.flat_yd)?,
            deep_yd: finite(row.deep_yd)?,
            pace_yd: finite(row.pace_yd)?,
            block_yd: finite(row.block_yd)?,
            move_yd: finite(row.move_yd)?,
        })
    }

    /// What he himself gave away: late, flat, deep and pace; neither the block nor the carrier's move.
    pub fn own_yd(&self) -> f64 {
        self.late_yd + self.flat_yd + self.deep_yd + self.pace_yd
    }
}

/// Own yards of a pursuit that is a chance: charged, with a whole account.
///
/// ```
/// use tailchase::{rating::own_yd, store::BriefRow};
/// let mut row = BriefRow { charged: true, conceded_yd: Some(5.0), ..BriefRow::default() };
/// assert_eq!(own_yd(&row), None); // the headings are missing
/// (row.late_yd, row.flat_yd, row.deep_yd) = (Some(1.0), Some(2.0), Some(0.0));
/// (row.pace_yd, row.block_yd, row.move_yd) = (Some(0.5), Some(1.0), Some(0.5));
/// assert_eq!(own_yd(&row), Some(3.5));
/// ```
pub fn own_yd(row: &BriefRow) -> Option<f64> {
    Account::of(row).map(|a| a.own_yd())
}

/// Whether a pursuit is charged and yet has no whole account: set aside and counted, never taken as zero.
pub fn is_broken(row: &BriefRow) -> bool {
    row.charged && row.conceded_yd.is_some() && Account::of(row).is_none()
}
