//! Two averages that laboratories also use: the middle five of seven breaths and the low-pass
//! filter. Offered to callers; the pipeline itself uses time means.

/// Middle five of seven: in a window of seven values the highest and lowest of `rank` drop out, the
/// mean of the other five of `x` stands at the fourth. The kept set follows `rank` for every
/// variable, so that ratios stay coherent. `None` in the first and last three places.
#[must_use]
pub fn middle_five_of_seven(x: &[f64], rank: &[f64]) -> Vec<Option<f64>> {
    let n = x.len().min(rank.len());
    let mut out = vec![None; n];
    for i in 3..n.saturating_sub(3) {
        let window = &rank[i - 3..=i + 3];
        let extreme = |high: bool| {
            let pick = |a: &usize, b: &usize| window[*a].total_cmp(&window[*b]);
            if high { (0..7).max_by(pick) } else { (0..7).min_by(pick) }
        };
        let (Some(high), Some(low)) = (extreme(true), extreme(false)) else { continue };
        // Seven equal values: any two drop out.
        let low = if low == high { (high + 1) % 7 } else { low };
        let kept = (0..7).filter(|k| *k != high && *k != low);
        out[i] = Some(kept.map(|k| x[i - 3 + k]).sum::<f64>() / 5.0);
    }
    out
}

/// Third-order Butterworth low-pass with the cut-off in Hz, forwards and backwards over a series
/// sampled at 1 Hz, ends extended by odd reflection. Coefficients by the bilinear transform.
#[must_use]
pub fn low_pass(x: &[f64], cut_off_hz: f64) -> Vec<f64> {
    let n = x.len();
    let pad = n.saturating_sub(1).min(3 * (1.0 / cut_off_hz) as usize);
    if pad == 0 || !(0.0..0.5).contains(&cut_off_hz) {
        return x.to_vec();
    }
    let k = libm::tan(core::f64::consts::PI * cut_off_hz);
    let mut series: Vec<f64> = (1..=pad).rev().map(|i| 2.0 * x[0] - x[i]).collect();
    series.extend_from_slice(x);
    series.extend((1..=pad).map(|i| 2.0 * x[n - 1] - x[n - 1 - i]));
    for _ in 0..2 {
        once(&mut series, k);
        series.reverse();
    }
    series[pad..pad + n].to_vec()
}

/// One pass: a first-order section 1/(s + 1) and a second-order one 1/(s² + s + 1), each started in
/// the steady state of the first value.
fn once(x: &mut [f64], k: f64) {
    let (b, a) = (k / (1.0 + k), (k - 1.0) / (k + 1.0));
    let (mut x1, mut y1) = (x[0], x[0]);
    for v in x.iter_mut() {
        let y = b * (*v + x1) - a * y1;
        (x1, y1) = (*v, y);
        *v = y;
    }
    let norm = 1.0 + k + k * k;
    let (b, a1, a2) = (k * k / norm, 2.0 * (k * k - 1.0) / norm, (1.0 - k + k * k) / norm);
    let (mut x1, mut x2, mut y1, mut y2) = (x[0], x[0], x[0], x[0]);
    for v in x.iter_mut() {
        let y = b * (*v + 2.0 * x1 + x2) - a1 * y1 - a2 * y2;
        (x2, x1, y2, y1) = (x1, *v, y1, y);
        *v = y;
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn highest_and_lowest_drop_out() {
        // 1 and 90 drop out: (2 + 3 + 4 + 5 + 6)/5 = 4.
        let x = [5.0, 90.0, 2.0, 4.0, 1.0, 6.0, 3.0];
        let found = middle_five_of_seven(&x, &x);
        assert_eq!(found[3], Some(4.0));
        assert_eq!(found.iter().flatten().count(), 1);
        // Ranked by another variable whose first two are the extremes: (2+4+1+6+3)/5 = 3.2.
        let rank = [9.0, 0.0, 5.0, 5.1, 5.2, 5.3, 5.4];
        assert_eq!(middle_five_of_seven(&x, &rank)[3], Some(3.2));
        assert_eq!(middle_five_of_seven(&[2.0; 7], &[2.0; 7])[3], Some(2.0));
        assert_eq!(middle_five_of_seven(&[], &[]), Vec::<Option<f64>>::new());
    }

    #[test]
    fn a_constant_and_a_line_pass() {
        let line: Vec<f64> = (0..400).map(|k| 100.0 + 2.0 * f64::from(k)).collect();
        for (y, x) in low_pass(&line, 0.04).iter().zip(&line).skip(100).take(200) {
            assert!((y - x).abs() < 1e-6, "{y} {x}");
        }
        assert!(low_pass(&[7.0; 200], 0.04).iter().all(|y| (y - 7.0).abs() < 1e-9));
    }

    #[test]
    fn at_the_cut_off_a_wave_keeps_half_its_size() {
        // Each pass leaves 1/√2 at the cut-off (definition of a Butterworth filter), so both ½.
        let wave: Vec<f64> = (0..2000)
            .map(|k| libm::sin(2.0 * core::f64::consts::PI * 0.04 * f64::from(k)))
            .collect();
        let out = low_pass(&wave, 0.04);
        let top = out[500..1500].iter().copied().fold(0.0, f64::max);
        assert!((top - 0.5).abs() < 0.005, "{top}");
    }
}
