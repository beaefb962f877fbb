//! Links: every set-up comes back bit for bit, and any text decodes or is refused.

use lampladder_core::lamp::{Lamp, LampSpec, Point};
use lampladder_core::link::{self, LinkError};
use lampladder_core::setup::Setup;
use lampladder_tests::random::{cases, setup};
use proptest::prelude::*;

proptest! {
    #![proptest_config(cases(200))]

    #[test]
    fn a_set_up_comes_back_from_its_link(setup in setup()) {
        let text = link::encode(&setup);
        prop_assert!(text.bytes().all(|byte| byte.is_ascii_alphanumeric() || b"-_".contains(&byte)), "{text}");
        prop_assert!(text.len() <= link::LONGEST);
        let back = link::decode(&text).expect("its own link");
        prop_assert_eq!(&back, &setup);
        prop_assert_eq!(link::encode(&back), text, "the same set-up, the same link");
    }

    #[test]
    fn a_changed_character_is_noticed(setup in setup(), at in any::<prop::sample::Index>(), to in "[A-Za-z0-9_-]") {
        let text = link::encode(&setup);
        let at = at.index(text.len());
        let mut changed = text.clone();
        changed.replace_range(at..=at, &to);
        if changed != text {
            prop_assert!(link::decode(&changed).is_err(), "{text}\n{changed}");
        }
    }

    #[test]
    fn a_cut_link_is_noticed_or_refused(setup in setup(), at in any::<prop::sample::Index>()) {
        let text = link::encode(&setup);
        let cut = &text[..at.index(text.len())];
        // The check byte lets one cut in 256 through; then the record itself must be whole, which it never is.
        prop_assert!(link::decode(cut).is_err(), "{cut}");
    }
}

proptest! {
    #![proptest_config(cases(5000))]

    #[test]
    fn any_text_decodes_or_is_refused(text in any::<String>()) {
        let _ = link::decode(&text);
    }

    #[test]
    fn any_text_in_the_alphabet_decodes_or_is_refused(text in "#?1[A-Za-z0-9_-]{0,120}") {
        let _ = link::decode(&text);
    }

    #[test]
    fn any_bytes_decode_or_are_refused(bytes in prop::collection::vec(any::<u8>(), 0..200)) {
        let _ = link::decode(&String::from_utf8_lossy(&bytes));
    }
}

#[test]
fn a_link_from_a_newer_version_says_so() {
    for version in '4'..='9' {
        assert_eq!(link::decode(&format!("#{version}AAAA")), Err(LinkError::Newer));
    }
}

#[test]
fn the_fullest_bench_still_fits_into_its_link() {
    // Eight lamps with every point that a lamp can carry, of numbers that no decimal shortens.
    let plain = Lamp::new(230.0, 60.0).expect("a stock size");
    let point = |index: u32| {
        let state = plain.at_volts(2.0 + 3.3 * f64::from(index));
        Point { volts: state.volts, amps: state.amps * 1.000_123_4 }
    };
    let spec = LampSpec {
        lumens: Some(702.0 / 3.0 * 3.1),
        cold_ohms: Some(200.0 / 3.0),
        points: (0..64).map(point).collect(),
        ..plain.spec().clone()
    };
    let lamp = Lamp::from_spec(spec).expect("in range");
    let bank = lampladder_core::bank::Bank::new(vec![vec![lamp; 4]; 2]).expect("eight lamps");
    let setup = Setup { bank, ..Setup::example().expect("in range") };
    assert_eq!(link::decode(&link::encode(&setup)), Ok(setup));
}
