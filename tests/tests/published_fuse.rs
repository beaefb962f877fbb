//! Fuses against the gates as data sheets declare them, row by row, each with its status.

use lampladder_core::fuse::{Fuse, Gate, Standard, Verdict};
use lampladder_core::switch_on::Heating;
use lampladder_tests::reference::{IecGate, UlGate, fuse_gates_iec, fuse_gates_ul, fuse_melting};

/// A constant current for a while, and nothing after it.
fn verdict(fuse: &Fuse, multiple: f64, seconds: f64) -> Verdict {
    let amps = multiple * fuse.rated_amps();
    fuse.judge_heating(&[Heating { seconds, amp2_seconds: amps * amps * seconds }], 0.0).verdict
}

/// A hair inside and outside of a gate: rounding must not decide.
const HAIR: f64 = 1e-6;

#[test]
fn the_table_in_the_code_is_the_table_of_the_reference() {
    let rows = fuse_gates_iec();
    for sheet in [1, 2, 3, 5] {
        let gates = Standard::iec_60127_2(sheet).expect("a sheet").gates();
        let rows: Vec<&IecGate> = rows.iter().filter(|row| row.sheet == sheet).collect();
        assert_eq!(gates.len(), rows.len(), "sheet {sheet}");
        for (gate, row) in gates.iter().zip(rows) {
            let Gate { rated_amps, multiple, least_seconds, most_seconds, status } = *gate;
            assert_eq!(rated_amps, (row.rated_amps_from, row.rated_amps_to));
            assert_eq!(multiple, row.multiple_of_rating);
            assert_eq!((least_seconds, most_seconds), (row.prearcing_seconds_min, row.prearcing_seconds_max));
            assert_eq!(status.name(), row.status);
        }
    }
    let rows = fuse_gates_ul();
    let gates = Standard::Ul248TimeDelay.gates();
    assert_eq!(gates.len(), rows.len());
    for (gate, row) in gates.iter().zip(&rows) {
        assert_eq!(gate.rated_amps, (row.rated_amps_from, row.rated_amps_to));
        assert_eq!(gate.multiple, row.multiple_of_rating);
        assert_eq!((gate.least_seconds, gate.most_seconds), (row.seconds_min, row.seconds_max));
        assert_eq!(gate.status.name(), row.status);
    }
    let plain: Vec<&UlGate> = rows.iter().filter(|row| !row.requirement.starts_with("time-delay")).collect();
    assert_eq!(Standard::Ul248.gates().len(), plain.len());
}

#[test]
fn every_row_of_iec_60127_2_is_kept() {
    let rows = fuse_gates_iec();
    for row in &rows {
        let standard = Standard::iec_60127_2(row.sheet).expect("a sheet");
        // Two data sheets give sheet 5 two least times at ten times the rating: the shorter is what is sure.
        let disagrees = rows.iter().any(|other| {
            other.sheet == row.sheet
                && other.rated_amps_from == row.rated_amps_from
                && other.multiple_of_rating == row.multiple_of_rating
                && other.prearcing_seconds_min < row.prearcing_seconds_min
        });
        for rated_amps in [row.rated_amps_from, row.rated_amps_to] {
            let fuse = Fuse::new(standard, rated_amps).expect("a rating of the sheet");
            if let Some(least) = row.prearcing_seconds_min.filter(|_| !disagrees) {
                let multiple = row.multiple_of_rating * (1.0 - HAIR);
                assert_eq!(verdict(&fuse, multiple, least * (1.0 - HAIR)), Verdict::Holds, "{row:?}");
            }
            if let Some(most) = row.prearcing_seconds_max {
                assert_eq!(
                    verdict(&fuse, row.multiple_of_rating * (1.0 + HAIR), most * (1.0 + HAIR)),
                    Verdict::Opens,
                    "{row:?}"
                );
                // Before that the standard leaves it open, unless it must still hold.
                let least = row.prearcing_seconds_min.unwrap_or(0.0);
                let between = f64::midpoint(least, most);
                assert_ne!(
                    verdict(&fuse, row.multiple_of_rating * (1.0 - HAIR), between),
                    Verdict::Opens,
                    "{row:?}"
                );
            }
        }
    }
}

#[test]
fn every_row_of_ul_248_14_is_kept() {
    for row in fuse_gates_ul() {
        let rated_amps = row.rated_amps_to;
        let fuse = Fuse::new(Standard::Ul248TimeDelay, rated_amps).expect("in range");
        if let Some(least) = row.seconds_min {
            let multiple = row.multiple_of_rating * (1.0 - HAIR);
            assert_eq!(verdict(&fuse, multiple, least * (1.0 - HAIR)), Verdict::Holds, "{row:?}");
        }
        if let Some(most) = row.seconds_max {
            let multiple = row.multiple_of_rating * (1.0 + HAIR);
            assert_eq!(verdict(&fuse, multiple, most * (1.0 + HAIR)), Verdict::Opens, "{row:?}");
        }
        if row.requirement.starts_with("carry; ") {
            assert_eq!(verdict(&fuse, row.multiple_of_rating * (1.0 - HAIR), 1e6), Verdict::Holds);
        }
    }
}

#[test]
fn one_makers_melting_heat_lies_between_the_gates_of_its_sheet() {
    for row in fuse_melting() {
        let fuse = Fuse::new(Standard::Iec60127Sheet3, row.rated_amps).expect("a rating of the series");
        assert_eq!(fuse.melting_amp2_seconds(), Some(row.melting_amp2_seconds));
        // Melting heat is measured at about ten times the rating: within the gate at that multiple, time for time.
        let seconds = row.melting_amp2_seconds / (100.0 * row.rated_amps * row.rated_amps);
        let gate = fuse.gates().iter().find(|gate| gate.multiple == 10.0).expect("a gate at ten times");
        assert!(
            (gate.least_seconds.expect("least")..=gate.most_seconds.expect("most")).contains(&seconds),
            "{} A: {seconds} s",
            row.rated_amps
        );
    }
}
