//! The catalogues of texts, each against what the program asks for and against English.

use lampladder_core::condition::Condition;
use lampladder_core::detail::Detail;
use lampladder_core::family::Family;
use lampladder_core::glow::GlowWord;
use lampladder_core::load::Mode;
use lampladder_core::readings::{Behaviour, Kind};
use lampladder_web::words::{catalogue, keys};

const ENGLISH: &str = include_str!("../words/en.txt");

fn entries(text: &str) -> Vec<(&str, &str)> {
    catalogue::entries(text).expect("lines of keys and texts")
}

#[test]
fn the_catalogue_has_every_key_that_is_asked_for_and_no_other() {
    let written: Vec<&str> = entries(ENGLISH).iter().map(|(key, _)| *key).collect();
    for (asked, written) in keys().iter().zip(&written) {
        assert_eq!(asked, written, "the program's order against the catalogue's");
    }
    assert_eq!(keys().len(), written.len());
}

#[test]
fn keys_of_enumerations_stand_in_the_order_of_their_variants() {
    let all = keys();
    let holds = |field: &str, at: usize, name: &str| {
        let prefix = format!("{field}.");
        let key = all.iter().filter_map(|key| key.strip_prefix(&prefix)).nth(at);
        assert_eq!(key, Some(name.replace(['-', ' '], "_").as_str()), "{field}");
    };
    for condition in Condition::ALL {
        for field in ["condition", "if_condition", "said", "means"] {
            holds(field, condition as usize, condition.name());
        }
    }
    for word in GlowWord::ALL {
        holds("glow", word as usize, word.name());
        holds("replay.flash", word as usize, word.name());
    }
    for family in Family::ALL {
        for field in ["family", "family_noun", "examples"] {
            holds(field, family as usize, family.name());
        }
    }
    for detail in Detail::ALL {
        holds("detail", detail as usize, detail.name());
    }
    for behaviour in Behaviour::ALL {
        holds("seen.behaves", behaviour as usize, behaviour.name());
        holds("seen.behaved", behaviour as usize, behaviour.name());
    }
    for kind in Kind::ALL {
        for field in ["reading", "seen.how", "seen.candidate"] {
            holds(field, kind as usize, kind.field().name());
        }
    }
    let modes = [Mode::Only, Mode::Off, Mode::Standing, Mode::Turning, Mode::DegaussCold, Mode::DegaussWarm];
    for mode in modes {
        holds("mode", mode as usize, mode.name());
        holds("mode_decides", mode as usize, mode.name());
    }
}

#[test]
fn nothing_promises_safety() {
    for (key, text) in entries(ENGLISH) {
        let text = text.to_lowercase();
        assert!(!text.contains("safe"), "{key}: {text}");
    }
}
