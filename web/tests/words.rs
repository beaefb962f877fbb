//! The catalogues of texts and the cautions: each language against what the program asks for, and against English.
#![cfg(not(target_arch = "wasm32"))]

use std::fs;

use lampladder_core::condition::Condition;
use lampladder_core::detail::{Detail, Standing};
use lampladder_core::family::{Family, Unsuitable, Warning};
use lampladder_core::fuse::{Status, Verdict};
use lampladder_core::glow::GlowWord;
use lampladder_core::ladder::FirstFrom;
use lampladder_core::load::Mode;
use lampladder_core::precheck::{Class, DischargePlace, Path, PlugFinding};
use lampladder_core::readings::{Behaviour, Kind};
use lampladder_web::bench::{Part, Tab, Theme};
use lampladder_web::log::Trouble;
use lampladder_web::replay::Closing;
use lampladder_web::words::ladder::Progress;
use lampladder_web::words::{LANGUAGES, catalogue, english, keys, read};

/// Words that are the same in another language, by key; what has no letters is the same in all.
const SAME: [(&str, &[&str]); 3] = [
    ("de", &["bank_parallel", "direct", "glow.orange", "fill.halogen", "hand_on.link"]),
    (
        "fr",
        &[
            "glow.orange",
            "given.watts",
            "table.volts",
            "table.kelvin",
            "replay.pause",
            "seen.weight.possible",
            "seen.note",
        ],
    ),
    ("es", &["fill.gas"]),
];
/// Names and signs that are the same everywhere.
const SIGNS: [&str; 5] =
    ["language.", "unsuitable.led", "replay.standard.ul", "ladder.class_name.", "ladder.over_range"];
/// How each language promises safety.
const PROMISES: [(&str, &[&str]); 4] = [
    ("en", &["safe", "safely", "safety"]),
    ("de", &["sicher", "sichere", "sicherer", "sicheres", "sicheren", "ungefährlich", "gefahrlos"]),
    ("fr", &["sûr", "sûre", "sûrs", "sûrement", "sécurité", "sécurisé"]),
    ("es", &["seguro", "segura", "seguros", "seguras", "seguridad"]),
];

fn root() -> &'static std::path::Path {
    std::path::Path::new(env!("CARGO_MANIFEST_DIR"))
}

/// The text of a catalogue, and its keys with their texts.
fn entries(tag: &str) -> Vec<(&'static str, &'static str)> {
    let file = root().join(format!("words/{tag}.txt"));
    let text = fs::read_to_string(&file).unwrap_or_else(|error| panic!("{}: {error}", file.display()));
    catalogue::entries(text.leak()).expect("lines of keys and texts")
}

fn has_letters(text: &str) -> bool {
    // Places are filled with something else.
    let mut rest = text.to_owned();
    for digit in 0..10 {
        rest = rest.replace(&format!("{{{digit}}}"), "");
    }
    rest.chars().any(char::is_alphabetic)
}

#[test]
fn every_catalogue_has_every_key_that_is_asked_for_in_order_and_no_other() {
    for tag in LANGUAGES {
        let written: Vec<&str> = entries(tag).iter().map(|(key, _)| *key).collect();
        for (asked, written) in keys().iter().zip(&written) {
            assert_eq!(asked, written, "{tag}: the program's order against the catalogue's");
        }
        assert_eq!(keys().len(), written.len(), "{tag}");
    }
    let files = fs::read_dir(root().join("words")).expect("a folder").count();
    assert_eq!(files, LANGUAGES.len(), "a catalogue of a language that nobody can choose");
}

#[test]
fn every_catalogue_has_the_places_and_plurals_of_english() {
    let english = entries("en");
    for tag in LANGUAGES {
        for ((key, text), (_, other)) in english.iter().zip(entries(tag)) {
            assert_eq!(catalogue::places(text), catalogue::places(other), "{tag}, {key}: {other}");
            assert_eq!(text.split('|').count(), other.split('|').count(), "{tag}, {key}: {other}");
        }
    }
}

#[test]
fn nothing_is_left_in_english() {
    let english = entries("en");
    for (tag, same) in SAME {
        let mut left: Vec<&str> = same.to_vec();
        for ((key, text), (_, other)) in english.iter().zip(entries(tag)) {
            if *text == other && has_letters(text) && !SIGNS.iter().any(|sign| key.starts_with(sign)) {
                assert!(same.contains(key), "{tag}, {key}: still {other}");
                left.retain(|listed| listed != key);
            }
        }
        assert!(left.is_empty(), "{tag}: {left:?} are no longer the same");
    }
}

#[test]
fn nothing_promises_safety() {
    let cautions = fs::read_to_string(root().join("../static/index.html")).expect("the page");
    for (tag, promises) in PROMISES {
        let said = entries(tag).into_iter().map(|(key, text)| (key, text.to_owned()));
        for (key, text) in said.chain([("cautions", section(&cautions, tag).to_owned())]) {
            let text = text.to_lowercase();
            let mut words = text.split(|letter: char| !letter.is_alphabetic());
            assert!(!words.any(|word| promises.contains(&word)), "{tag}, {key}: {text}");
        }
    }
}

#[test]
fn numbers_are_in_the_readers_form() {
    for tag in LANGUAGES {
        let entries = entries(tag);
        let decimal = entries.iter().find(|(key, _)| *key == "decimal").expect("a decimal mark").1;
        let other = if decimal == "." { "," } else { "." };
        for (key, text) in &entries {
            for (at, _) in text.match_indices(other) {
                let digit = |letter: Option<char>| letter.is_some_and(|letter| letter.is_ascii_digit());
                let (before, after) = (text[..at].chars().next_back(), text[at + 1..].chars().next());
                assert!(!(digit(before) && digit(after)), "{tag}, {key}: {text}");
            }
        }
        let words = read(catalogue::texts(catalogue::parts(&entries).0)).expect("reads");
        assert_eq!(words.numerals.plain(0.5), format!("0{decimal}5"));
    }
}

#[test]
fn every_text_is_used() {
    let mut source = String::new();
    let mut folders = vec![root().join("src")];
    while let Some(folder) = folders.pop() {
        for entry in fs::read_dir(folder).expect("a folder") {
            let path = entry.expect("an entry").path();
            if path.is_dir() {
                folders.push(path);
            } else {
                source += &fs::read_to_string(path).expect("source");
            }
        }
    }
    // Read before anything else.
    for key in keys().into_iter().filter(|key| !["decimal", "singular"].contains(key)) {
        let mut parts = key.split('.');
        let first = parts.next().unwrap_or_default();
        let grouped = ["edit", "table", "replay", "seen", "ladder", "hand_on", "card"].contains(&first);
        let field = if grouped && key.contains('.') { parts.next().unwrap_or(first) } else { first };
        let used = source.match_indices(&format!(".{field}")).any(|(at, found)| {
            let next = source[at + found.len()..].chars().next();
            next.is_some_and(|next| !next.is_alphanumeric() && next != '_')
        });
        assert!(used, "nothing uses {key}");
    }
}

/// Fails unless a field's key at a place bears the name of the variant that is picked there.
fn holds(field: &str, at: usize, name: &str) {
    let prefix = format!("{field}.");
    let key = keys().into_iter().filter_map(|key| key.strip_prefix(&prefix)).nth(at);
    assert_eq!(key, Some(name.replace(['-', ' '], "_").as_str()), "{field}");
}

/// A variant as keys are written: `SlowRise` as `slow_rise`.
fn snake(debug: &str) -> String {
    let mut name = String::new();
    for letter in debug.chars() {
        if letter.is_uppercase() && !name.is_empty() {
            name.push('_');
        }
        name.extend(letter.to_lowercase());
    }
    name
}

#[test]
fn keys_of_enumerations_stand_in_the_order_of_their_variants() {
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
    for mode in [Mode::Only, Mode::Off, Mode::Standing, Mode::Turning, Mode::DegaussCold, Mode::DegaussWarm] {
        holds("mode", mode as usize, mode.name());
        holds("mode_decides", mode as usize, mode.name());
    }
    for class in Class::ALL {
        holds("ladder.class_name", class as usize, &snake(&format!("{class:?}")));
        holds("ladder.class_means", class as usize, &snake(&format!("{class:?}")));
    }
    for verdict in [Verdict::Holds, Verdict::MayOpen, Verdict::Opens] {
        holds("replay.verdict", verdict as usize, verdict.name());
    }
    for status in [Status::Declared, Status::SecondHand, Status::Memory] {
        holds("replay.fuse_note", status as usize, &snake(&format!("{status:?}")));
    }
    let refused =
        [Unsuitable::MicrowaveOven, Unsuitable::Medical, Unsuitable::ThreePhase, Unsuitable::TooPowerful];
    for kind in refused {
        holds("unsuitable_equipment", kind as usize, &snake(&format!("{kind:?}")));
        holds("refuse_equipment", kind as usize, &snake(&format!("{kind:?}")));
    }
    let warnings = [
        Warning::Hunts,
        Warning::StandsAndHeats,
        Warning::LiveChassis,
        Warning::TubeVoltage,
        Warning::LooksShorted,
        Warning::ChargedReservoir,
        Warning::MovingParts,
    ];
    for warning in warnings {
        holds("warning", warning as usize, &snake(&format!("{warning:?}")));
    }
    let places = [
        DischargePlace::PlugPins,
        DischargePlace::LiveParts,
        DischargePlace::ExposedPins,
        DischargePlace::Accessible,
    ];
    for place in places {
        holds("ladder.place", place as usize, &snake(&format!("{place:?}")));
    }
    for finding in [PlugFinding::Healthy, PlugFinding::ShortedInput, PlugFinding::OpenPath] {
        holds("ladder.finding", finding as usize, &snake(&format!("{finding:?}")));
    }
}

#[test]
fn keys_of_choices_stand_in_the_order_of_their_variants() {
    let path = [
        Path::Primary,
        Path::Motor,
        Path::ColdHeaters,
        Path::Element,
        Path::ColdFilament,
        Path::Degauss,
        Path::Rectifier,
        Path::Measured,
        Path::Unknown,
    ];
    for path in path {
        holds("ladder.path", path as usize, &snake(&format!("{path:?}")));
    }
    for from in [FirstFrom::Plate, FirstFrom::Least, FirstFrom::Most] {
        holds("ladder.first_from", from as usize, &snake(&format!("{from:?}")));
    }
    for standing in [Standing::Published, Standing::Memory, Standing::Design] {
        holds("ladder.quoted", standing as usize, &snake(&format!("{standing:?}")));
    }
    for progress in [Progress::Done, Progress::LeftOut, Progress::Now, Progress::Next] {
        holds("ladder.progress", progress as usize, &snake(&format!("{progress:?}")));
    }
    for tab in [Tab::Expect, Tab::Seen, Tab::Ladder, Tab::SwitchOn, Tab::Curve, Tab::HandOn] {
        holds("tab", tab as usize, &snake(&format!("{tab:?}")));
    }
    for theme in [Theme::Auto, Theme::Paper, Theme::Dusk] {
        holds("theme", theme as usize, &snake(&format!("{theme:?}")));
    }
    for part in [Part::Supply, Part::Bank, Part::Equipment] {
        holds("part", part as usize, &snake(&format!("{part:?}")));
        holds("change", part as usize, &snake(&format!("{part:?}")));
    }
    for closing in Closing::ALL {
        holds("replay.closing", closing as usize, &snake(&format!("{closing:?}")));
        holds("replay.assumes_when", closing as usize, &snake(&format!("{closing:?}")));
    }
    for trouble in [Trouble::Forbidden, Trouble::Full, Trouble::Lost] {
        holds("seen.trouble", trouble as usize, &snake(&format!("{trouble:?}")));
    }
    for (at, tag) in LANGUAGES.into_iter().enumerate() {
        holds("language", at, tag);
    }
}

/// The cautions of one language.
fn section<'a>(page: &'a str, tag: &str) -> &'a str {
    let start = page.split(&format!("<section id=\"cautions-{tag}\"")).nth(1).expect("a section");
    start.split("</section>").next().expect("its end")
}

#[test]
fn the_cautions_say_as_much_in_every_language() {
    let page = fs::read_to_string(root().join("../static/index.html")).expect("the page");
    let english = section(&page, "en").matches("<li><b>").count();
    assert!(english >= 9);
    for tag in LANGUAGES {
        let section = section(&page, tag);
        assert_eq!(section.matches("<li><b>").count(), english, "{tag}");
        assert!(section.contains(&format!("lang=\"{tag}\"")), "{tag}");
        assert!(
            page.contains(&format!("data-language=\"{tag}\"")),
            "{tag} cannot be chosen over the cautions"
        );
        // The figure that no language may lose or change.
        assert!(section.contains("CAT\u{a0}II 300\u{a0}V"), "{tag}");
    }
    assert_eq!(page.matches("<section id=\"cautions-").count(), LANGUAGES.len());
}

#[test]
fn what_is_read_is_what_is_written() {
    let entries = entries("en");
    let (first, later) = catalogue::parts(&entries);
    let texts = catalogue::texts(first);
    let words = read(texts.clone()).expect("reads");
    assert_eq!(words.reminder, english().reminder);
    assert_eq!(words.complete(catalogue::texts(later)), Ok(()));
    let short = texts.lines().take(100).collect::<Vec<_>>().join("\n");
    assert_eq!(read(short).err().map(|bad| bad.line), Some(101));
    assert_eq!(read(texts + "\nmore").err().map(|bad| bad.line), Some(first.len() + 1));
}
