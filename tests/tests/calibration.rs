//! The weights of a diagnosis are honest: of the conditions given a weight, as many are the true one as it says.
//!
//! `cargo xtask bench diagnosis` counts ten thousand benches; this is a part of them, from recorded starts.

use lampladder_tests::reliability::tally;

/// Benches counted here: enough for the tenths at both ends, few enough for every run of the suite.
const BENCHES: usize = 400;

/// How far the part that is right may be from the weight stated, before chance: the promise is a tenth either way of the
/// middle of a tenth, 85 to 95 % for 90 %.
const PROMISED: f64 = 0.05;

/// How many standard deviations of chance come on top: eleven tenths fail by chance together once in 300 runs of fresh
/// starts. These starts are fixed, so a failure is a change of the code.
const CHANCE: f64 = 3.5;

#[test]
fn stated_weights_are_the_rate_at_which_they_are_right() {
    let tally = tally(2, BENCHES);
    tally.print();
    for (tenth, bin) in tally.bins.iter().enumerate().filter(|(_, bin)| bin.count > 0.0) {
        let off = (bin.rate() - bin.mean()).abs();
        let allowed = PROMISED + CHANCE * bin.deviation();
        assert!(off <= allowed, "about {} %: stated {}, right {}", 10 * tenth, bin.mean(), bin.rate());
    }
    assert!(
        tally.after_recommended > tally.after_random && tally.after_random > tally.before,
        "the recommended reading must beat a random one"
    );
    for (what, (all, held)) in [("current", tally.amps), ("power", tally.watts)] {
        #[expect(clippy::cast_precision_loss, reason = "a few hundred")]
        let (all, held) = (all as f64, held as f64);
        // 93 to 97 % are promised; chance on top of that, as above.
        let chance = CHANCE * (0.95 * 0.05 / all).sqrt();
        assert!((held / all - 0.95).abs() <= 0.02 + chance, "{what}: {held} of {all}");
    }
}
