//! Samples and what may be said from them: quantiles, circular means, partial pooling, clustered errors, least squares.
//! Nothing here knows a play or a player, and nothing draws a random number that it was not given a seed for.

pub mod circular;
pub mod cluster;
pub mod least_squares;
pub mod pooling;
pub mod quantile;
pub mod rank_draws;
pub mod root;
pub mod tau;
pub mod tau_posterior;
pub mod within;

pub use circular::Circular;
pub use cluster::{Clustered, cluster_variance, clustered_means};
pub use least_squares::{Fit, least_squares};
pub use pooling::{Pooled, Shrunken, pool, pool_at};
pub use quantile::{median, median_in_place, quantile};
pub use rank_draws::{RankDraws, rank_intervals};
pub use tau::{TauMethod, tau2};
pub use tau_posterior::TauPosterior;
pub use within::{WithinFit, within_fit};
