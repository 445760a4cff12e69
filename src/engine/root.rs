//! A bracketing root finder.

/// The zero in (0, 1] of a function that is positive at 0 and not at 1: Illinois regula falsi
/// (Dowell & Jarratt 1971), which keeps its bracket.
pub fn first_zero(f: impl Fn(f64) -> f64) -> f64 {
    let (mut low, mut f_low) = (0.0, f(0.0));
    let (mut high, mut f_high) = (1.0, f(1.0));
    if f_low <= 0.0 {
        return 0.0;
    }
    let mut side = 0;
    for _ in 0..60 {
        let middle = (low * f_high - high * f_low) / (f_high - f_low);
        if !(middle > low && middle < high) {
            break;
        }
        let f_middle = f(middle);
        if f_middle.abs() < 1e-11 {
            return middle;
        }
        if f_middle > 0.0 {
            (low, f_low) = (middle, f_middle);
            if side == 1 {
                f_high *= 0.5;
            }
            side = 1;
        } else {
            (high, f_high) = (middle, f_middle);
            if side == -1 {
                f_low *= 0.5;
            }
            side = -1;
        }
        if high - low < 1e-15 {
            break;
        }
    }
    high
}
