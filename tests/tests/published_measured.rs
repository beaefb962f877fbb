//! Calibration against lamps that others measured: within 3 % over the measured range, and where not, why not.

use lampladder_core::expect;
use lampladder_core::lamp::{Lamp, LampSpec, Point};
use lampladder_tests::lamps::lamp_from;
use lampladder_tests::reference;

/// The issue's own limit.
const CALIBRATED: f64 = 0.03;

/// New Physics: Sae Mulli 73 (2023) 127, table 2 (published second hand); the rating is in its name.
const TORCH: (&str, f64, f64) = ("small_2.5V_0.3A", 2.5, 0.75);

/// Open student laboratory data. Its rating is not stated; a stock size that the highest readings (9.81 V, 83 mA) lead
/// to is taken. The fit hardly depends on it: 8 V 0.5 W to 14 V 1.35 W leave the same residuals within 0.5 %.
const INDICATOR: (&str, f64, f64) = ("small_indicator_lamp", 12.0, 1.1);

fn points(name: &str) -> Vec<Point> {
    let rows = reference::measured_curves();
    let points = rows.iter().filter(|row| row.lamp == name);
    points.map(|row| Point { volts: row.volts, amps: row.amps }).collect()
}

fn calibrated((_, volts, watts): (&str, f64, f64), points: &[Point]) -> Lamp {
    lamp_from(LampSpec { volts, watts, points: points.to_vec(), ..LampSpec::default() })
}

/// Current of the model over the measured one, less 1.
fn residual(lamp: &Lamp, point: &Point) -> f64 {
    lamp.at_volts(point.volts).amps / point.amps - 1.0
}

#[test]
fn a_calibrated_torch_lamp_follows_its_measured_curve() {
    let points = points(TORCH.0);
    let ours = calibrated(TORCH, &points);
    for point in &points {
        let residual = residual(&ours, point);
        assert!(residual.abs() < CALIBRATED, "{} V: {residual:+.3}", point.volts);
    }
}

#[test]
fn a_torch_lamp_calibrated_on_the_other_points_foretells_each() {
    // Fitting all points proves little for a lamp with three free numbers and seven points: leave each out in turn.
    let all = points(TORCH.0);
    for (index, left_out) in all.iter().enumerate() {
        let mut others = all.clone();
        others.remove(index);
        let residual = residual(&calibrated(TORCH, &others), left_out);
        assert!(residual.abs() < CALIBRATED, "{} V: {residual:+.3}", left_out.volts);
    }
}

#[test]
fn calibration_narrows_the_band_to_the_measured_curve() {
    let points = points(TORCH.0);
    let before = calibrated(TORCH, &[]);
    let after = calibrated(TORCH, &points);
    for point in &points {
        let (wide, narrow) =
            (expect::lamp_amps(&before, point.volts), expect::lamp_amps(&after, point.volts));
        assert!(narrow.high - narrow.low < 0.7 * (wide.high - wide.low), "{} V", point.volts);
        // What the uncalibrated lamp promised held.
        assert!((wide.low..=wide.high).contains(&point.amps), "{} V: {wide:?}", point.volts);
    }
}

#[test]
fn an_indicator_lamp_is_followed_where_its_readings_agree_with_each_other() {
    /// From here on the readings lie on one smooth curve.
    const SMOOTH_FROM_VOLTS: f64 = 1.5;
    let points = points(INDICATOR.0);
    let ours = calibrated(INDICATOR, &points);
    let worst: Vec<&Point> =
        points.iter().filter(|point| residual(&ours, point).abs() >= CALIBRATED).collect();
    for point in points.iter().filter(|point| point.volts > SMOOTH_FROM_VOLTS) {
        let residual = residual(&ours, point);
        assert!(residual.abs() < CALIBRATED, "{} V: {residual:+.3}", point.volts);
    }
    // Where not: 0.34, 0.5, 1.18 and 1.42 V.
    assert!(worst.len() <= 4, "{worst:?}");
    // Why not: each of these has a neighbour, within a factor of two in voltage, that misses to the other side, and the
    // two together by more than twice 3 %. Every curve that rises as smoothly as a filament's misses one of the pair.
    for one in &worst {
        let mismatch = points
            .iter()
            .filter(|other| (0.5..2.0).contains(&(other.volts / one.volts)))
            .map(|other| (residual(&ours, one) - residual(&ours, other)).abs())
            .fold(0.0, f64::max);
        assert!(mismatch > 1.9 * CALIBRATED, "{} V is off by itself: {mismatch:.3}", one.volts);
    }
}

#[test]
fn the_indicator_readings_contradict_each_other_below_a_volt_and_a_half() {
    // Between neighbours, the exponent of the current: a filament's changes slowly, and nowhere along the calibrated
    // lamp is it under 0.3. The readings go 0.51, 0.17, 0.51, 0.43, 0.23, 0.46, 0.63 and are smooth from then on.
    let points = points(INDICATOR.0);
    let ours = calibrated(INDICATOR, &points);
    let slope = |a: (f64, f64), b: (f64, f64)| (b.1 / a.1).ln() / (b.0 / a.0).ln();
    let (mut jumps_low, mut jumps_high) = (0.0_f64, 0.0_f64);
    let mut last: Option<f64> = None;
    for pair in points.windows(2) {
        let measured = slope((pair[0].volts, pair[0].amps), (pair[1].volts, pair[1].amps));
        let at = |volts: f64| (volts, ours.at_volts(volts).amps);
        let model = slope(at(pair[0].volts), at(pair[1].volts));
        assert!(model > 0.3, "{} V: {model}", pair[0].volts);
        let jump = last.map_or(0.0, |last| f64::abs(measured - last));
        if pair[0].volts < 1.5 {
            jumps_low = jumps_low.max(jump);
        } else {
            jumps_high = jumps_high.max(jump);
        }
        last = Some(measured);
    }
    assert!(jumps_low > 0.3 && jumps_high < 0.07, "{jumps_low} {jumps_high}");
}
