//! What is handed on: all of it comes back bit for bit from both spellings, damage is noticed, the links of every version
//! that was ever shared stay readable, and a full set-up stays short.

use lampladder_core::bank::Bank;
use lampladder_core::condition::Condition;
use lampladder_core::detail::Detail;
use lampladder_core::diagnosis::Advice;
use lampladder_core::family::Family;
use lampladder_core::glow::GlowWord;
use lampladder_core::hand_on::{HandedOn, Position, PositionSpec, Step};
use lampladder_core::kept::{HEADS, Kept, KeptSpec, Verdict, table};
use lampladder_core::lamp::{Fill, Lamp, LampSpec};
use lampladder_core::link::{self, LinkError, Spelling};
use lampladder_core::plate::{Plate, PlateSpec};
use lampladder_core::precheck::Class;
use lampladder_core::readings::{Behaviour, MeterSpec, Response};
use lampladder_core::setup::Setup;
use lampladder_core::stock::Stock;
use lampladder_core::supply::Supply;
use lampladder_tests::random::{cases, handed_on, kept, setup};
use proptest::prelude::*;

const SPELLINGS: [Spelling; 2] = [Spelling::Letters, Spelling::Digits];

fn text(handed: &HandedOn, spelling: Spelling) -> String {
    link::encode_all(handed, spelling).expect("short enough")
}

proptest! {
    #![proptest_config(cases(200))]

    #[test]
    fn all_that_is_handed_on_comes_back(handed in handed_on()) {
        for spelling in SPELLINGS {
            let text = text(&handed, spelling);
            prop_assert!(text.bytes().all(|byte| byte.is_ascii_alphanumeric() || b"-_".contains(&byte)), "{text}");
            let back = link::decode_all(&format!("#{text}")).expect("its own link");
            prop_assert_eq!(&back, &handed);
            prop_assert_eq!(link::decode(&text), Ok(handed.setup.clone()));
            prop_assert_eq!(link::encode_all(&back, spelling), Ok(text), "the same, the same link");
        }
    }

    #[test]
    fn a_set_up_comes_back_from_the_digits(setup in setup()) {
        let text = text(&HandedOn::only(setup.clone()), Spelling::Digits);
        prop_assert!(text.bytes().all(|byte| byte.is_ascii_digit()));
        prop_assert_eq!(link::decode(&text), Ok(setup));
    }

    #[test]
    fn a_changed_character_is_noticed(
        handed in handed_on(),
        digits: bool,
        at in any::<prop::sample::Index>(),
        to in "[A-Za-z0-9_-]",
    ) {
        let text = text(&handed, SPELLINGS[usize::from(digits)]);
        let at = at.index(text.len());
        let mut changed = text.clone();
        changed.replace_range(at..=at, &to);
        if changed != text {
            prop_assert!(link::decode(&changed).is_err(), "{text}\n{changed}");
        }
    }

    #[test]
    fn any_digits_decode_or_are_refused(text in "3[0-9]{0,200}") {
        let _ = link::decode_all(&text);
    }

    #[test]
    fn any_letters_decode_or_are_refused(text in "2[A-Za-z0-9_-]{0,200}") {
        let _ = link::decode_all(&text);
    }

    #[test]
    fn a_record_with_anything_in_it_decodes_or_is_refused(
        handed in handed_on(),
        at in any::<prop::sample::Index>(),
        to: u8,
    ) {
        // The check byte keeps chance out of the record; here it is put right again, as a forger would.
        let mut bytes = letters(&text(&handed, Spelling::Letters)[1..]);
        bytes.pop();
        let at = at.index(bytes.len());
        bytes[at] = to;
        bytes.push(check(&bytes));
        let forged = format!("2{}", spelt(&bytes));
        let _ = link::decode_all(&forged);
    }

    #[test]
    fn a_table_of_readings_is_read_by_the_csv_crate(all in setup().prop_flat_map(|setup| prop::collection::vec(kept(setup), 0..5))) {
        let text = table(&all);
        let mut reader = csv::Reader::from_reader(text.as_bytes());
        prop_assert_eq!(reader.headers().expect("a head row"), HEADS.as_slice());
        let rows: Vec<csv::StringRecord> = reader.records().collect::<Result<_, _>>().expect("rows of one length");
        prop_assert_eq!(rows.len(), all.len());
        let cell = |row: &csv::StringRecord, head: &str| {
            row[HEADS.iter().position(|other| *other == head).expect("a head")].to_owned()
        };
        for (row, kept) in rows.iter().zip(&all) {
            let spec = kept.spec();
            prop_assert_eq!(link::decode(&cell(row, "link")), Ok(spec.setup.clone()));
            let volts: f64 = cell(row, "mains_V").parse().expect("a number");
            prop_assert_eq!(volts, spec.setup.supply.volts());
            prop_assert_eq!(cell(row, "read_A").parse().ok(), spec.numbers[3]);
            let note = cell(row, "note");
            let note = note.strip_prefix('\'').filter(|_| !spec.note.starts_with('\'')).unwrap_or(&note);
            prop_assert_eq!(note, &spec.note);
        }
    }
}

/// CRC-8 of ITU-T I.432.1, as the link has it.
fn check(bytes: &[u8]) -> u8 {
    bytes.iter().fold(0xff, |crc, &byte| {
        (0..8).fold(crc ^ byte, |crc, _| if crc & 0x80 == 0 { crc << 1 } else { (crc << 1) ^ 0x07 })
    })
}

const LETTERS: &[u8; 64] = b"ABCDEFGHIJKLMNOPQRSTUVWXYZabcdefghijklmnopqrstuvwxyz0123456789-_";

/// Bit by bit, so that it shares nothing with the link's own.
fn letters(text: &str) -> Vec<u8> {
    let value = |letter: u8| LETTERS.iter().position(|other| *other == letter).expect("a letter");
    let bits: Vec<usize> =
        text.bytes().flat_map(|letter| (0..6).rev().map(move |bit| value(letter) >> bit & 1)).collect();
    let byte = |bits: &[usize]| bits.iter().fold(0_u8, |byte, bit| byte << 1 | u8::from(*bit == 1));
    bits.chunks_exact(8).map(byte).collect()
}

fn spelt(bytes: &[u8]) -> String {
    let bits: Vec<u8> = bytes.iter().flat_map(|byte| (0..8).rev().map(move |bit| byte >> bit & 1)).collect();
    let letter = |bits: &[u8]| {
        let value = (0..6).fold(0, |value, at| value << 1 | usize::from(bits.get(at) == Some(&1)));
        char::from(LETTERS[value])
    };
    bits.chunks(6).map(letter).collect()
}

/// The link of a record that somebody made by hand.
fn by_hand(change: impl Fn(&mut Vec<u8>)) -> String {
    let mut bytes = letters(&text(&HandedOn::only(example()), Spelling::Letters)[1..]);
    bytes.pop();
    change(&mut bytes);
    bytes.push(check(&bytes));
    format!("2{}", spelt(&bytes))
}

fn example() -> Setup {
    Setup::example().expect("in range")
}

#[test]
fn a_part_that_nobody_knows_is_of_a_newer_version_and_a_broken_one_is_damaged() {
    assert_eq!(link::decode(&by_hand(|_| {})), Ok(example()));
    for (part, error) in [
        (&[9, 2, 7, 7][..], LinkError::Newer),
        (&[0, 0], LinkError::Newer),
        (&[1, 5, 0], LinkError::Damaged),
        (&[1], LinkError::Damaged),
        // The same part twice.
        (&[1, 1, 0, 1, 1, 0], LinkError::Damaged),
    ] {
        let text = by_hand(|bytes| bytes.extend_from_slice(part));
        assert_eq!(link::decode(&text), Err(error), "{part:?}");
        assert_eq!(link::decode_all(&text), Err(error), "{part:?}");
    }
    // A step, a class and a kind of reading that nobody knows; a position that goes on after its end.
    for (part, error) in [
        (&[2, 2, 9, 1][..], LinkError::Newer),
        (&[2, 2, 0, 9], LinkError::Newer),
        (&[2, 6, 0, 1, 18, 0, 0, 0x40], LinkError::Newer),
        (&[2, 7, 0, 1, 18, 0, 0, 0, 0], LinkError::Damaged),
        (&[2, 0], LinkError::Damaged),
        (&[3, 3, 1, 9, 0], LinkError::Newer),
    ] {
        let text = by_hand(|bytes| bytes.extend_from_slice(part));
        assert_eq!(link::decode_all(&text), Err(error), "{part:?}");
    }
}

#[test]
fn links_of_newer_versions_say_so_and_odd_ones_are_damaged() {
    for version in '4'..='9' {
        assert_eq!(link::decode_all(&format!("#{version}AAAA")), Err(LinkError::Newer));
    }
    for text in ["2", "3", "31", "3abc", "2!", "0123"] {
        assert_eq!(link::decode_all(text), Err(LinkError::Damaged), "{text}");
    }
    assert_eq!(link::decode_all(""), Err(LinkError::Empty));
    let long = "3".repeat(link::LONGEST_HANDED_ON + 1);
    assert_eq!(link::decode_all(&long), Err(LinkError::TooLong));
}

fn lamp(watts: f64, lumens: f64, fill: Fill) -> Lamp {
    let spec = LampSpec {
        lumens: Some(lumens),
        fill: Some(fill),
        ..LampSpec { volts: 230.0, watts, ..LampSpec::default() }
    };
    Lamp::from_spec(spec).expect("in range")
}

fn read(milliseconds: f64, setup: Setup, note: &str) -> Kept {
    let meter = MeterSpec { percent: 0.8, digits: 3.0, counts: 6000.0, response: Response::Averaging };
    let verdict = Verdict { advice: Advice::Stop, leader: Condition::ShortedReservoir, weight: 0.875 };
    Kept::from_spec(KeptSpec {
        milliseconds,
        setup,
        rung: Some(2),
        meter,
        numbers: [Some(231.0), Some(67.5), None, Some(0.16), None, None],
        look: Some(GlowWord::DullRed),
        behaviour: Some(Behaviour::FlashThenDim),
        verdict: Some(verdict),
        note: note.to_owned(),
    })
    .expect("in range")
}

/// Every field of supply and plate, every default of the kind of equipment that has most of them, and four lamps of which
/// everything is known that can be printed on a lamp: no two alike, and none measured.
fn full() -> Setup {
    let lamps = [
        vec![lamp(60.0, 710.0, Fill::Gas), lamp(100.0, 1340.0, Fill::Gas)],
        vec![lamp(42.0, 630.0, Fill::Halogen), lamp(15.0, 110.0, Fill::Vacuum)],
    ];
    let family = Family::ALL.into_iter().max_by_key(|family| defaults(*family).len()).expect("twelve");
    let spec = PlateSpec {
        watts: Some(145.0),
        amps: Some(0.95),
        volt_amps: Some(210.0),
        power_factor: Some(0.69),
        details: defaults(family),
        ..PlateSpec::new(family, 230.0)
    };
    Setup {
        supply: Supply::new(233.0, 50.0, 0.4).expect("in range"),
        bank: Bank::new(lamps.to_vec()).expect("four lamps"),
        plate: Plate::from_spec(spec).expect("in range"),
    }
}

fn defaults(family: Family) -> Vec<(Detail, f64)> {
    family.details().iter().map(|default| (default.detail, default.value)).collect()
}

/// As long as an address of such a page is: a host's name, a folder.
const ADDRESS: &str = "https://bench.example.org/tools/lampladder/#";

#[test]
fn a_full_set_up_is_short() {
    let setup = full();
    assert!(setup.plate.spec().details.len() > 3, "{:?}", setup.plate.spec().details);
    assert_eq!(ADDRESS.len(), 44);
    let handed = HandedOn::only(setup.clone());
    let shared = format!("{ADDRESS}{}", text(&handed, Spelling::Letters));
    assert!(shared.len() <= 200, "{} characters: {shared}", shared.len());
    // What stands in the address bar is of version 1, and somewhat longer.
    let bar = link::encode(&setup);
    assert!(bar.len() <= 200, "{} characters: {bar}", bar.len());
    // Bits of a QR code of version 8 at level M: 1232 (ISO/IEC 18004, table 7). Its segments are bytes, 4 bits and a count of
    // 8, and digits, 4 bits and a count of 10, three to 10 bits (tables 2 and 3).
    let digits = text(&handed, Spelling::Digits).len();
    let bits = 4 + 8 + 8 * ADDRESS.len() + 4 + 10 + (10 * digits).div_ceil(3);
    assert!(bits <= 1232, "{bits} bits, {digits} digits");
}

fn stood() -> HandedOn {
    let position = PositionSpec {
        step: Step::Rung(1),
        class: Class::Two,
        lead_metres: 12.5,
        looked_over: true,
        checks: [None, Some(f64::INFINITY), Some(1200.0), Some(1e-4), None, None],
    };
    let stock = [(lamp(60.0, 710.0, Fill::Gas), 2.0), (Lamp::new(230.0, 25.0).expect("a stock size"), 1.0)];
    HandedOn {
        stock: Some(Stock::new(stock).expect("three lamps")),
        position: Some(Position::from_spec(position).expect("in range")),
        log: vec![read(1_796_128_200_123.0, full(), "hums"), read(1_796_128_800_000.0, example(), "")],
        ..HandedOn::only(full())
    }
}

/// Links as they were made on the day on which their version was: of the set-up alone in version 1, of all in versions 2
/// and 3. They stay readable for ever.
#[test]
fn a_link_once_shared_stays_readable() {
    let golden = [
        (
            HandedOn::only(example()),
            [
                "1AC4BAAoBAAAAAQEALgEADAEAAAIALgEBAFoAAAAAAJE",
                "2Ey4TChIAAQEAEy4TDAITLgESWgC_",
                "305398683865710593002815573540894740539860669523577502",
            ],
        ),
        (
            HandedOn::only(full()),
            [
                "1ANIDAAAKAQAI_wICAC4BAAwBAgEBAI4BAQAAAAAALgEAAgICAQEAjAIBAAAAAAIALgEAVAADAQEAfgEAAAAAAC4BAB4AAQEBABY\
            BAAAAAAgALgEBAKICAAEAvgH-AQAqAQEAigH-CQkAxgEACgCiAQALAAQADAAKAAgACv4SAAz_DQAyAA4ABP4PAB7_-w",
                "2EtIDEwoRCAICBhMuEwwTjgEGEy4UAhOMAgIHEy4SVBN-BRMuEh4TFggTLg8SogIQvgETKhCKAQkJEsYBChKiAQsSBAwSCggQChI\
            RDA0SMg4QBA8RHhg",
                "3052974602269534800056517506826727605504159605534228005844420034578111296800124226894712967769307219\
            9871296442163056249400302546363744521025539164206578260029364698192743402269435252509709051215855604\
            242090770477",
            ],
        ),
        (
            stood(),
            [
                "1ANIDAAAKAQAI_wICAC4BAAwBAgEBAI4BAQAAAAAALgEAAgICAQEAjAIBAAAAAAIALgEAVAADAQEAfgEAAAAAAC4BAB4AAQEBABY\
            BAAAAAAgALgEBAKICAAEAvgH-AQAqAQEAigH-CQkAxgEACgCiAQALAAQADAAKAAgACv4SAAz_DQAyAA4ABP4PAB7_-w",
                "2EtIDEwoRCAICBhMuEwwTjgEGEy4UAhOMAgIHEy4SVBN-BRMuEh4TFggTLg8SogIQvgETKhCKAQkJEsYBChKiAQsSBAwSCggQChI\
            RDA0SMg4QBA8RHgEQAgYTLhMME44BAgATLhIyAQIVAgECEfoBAQ4lAAAAAAAA8H8UGA4CA1QCALur1YyjNAIBERASBhUMAQsSzgM\
            RxgoQIAMCAggP1g0EaHVtcwITLhMKEgABAQATLhMMAhMuARJaAID6-YyjNAIACxLOAxHGChAgAwICCA_WDQAL",
                "3052974602269534800056517506826727605504159605534228005844420034578111296800124226894712967769307219\
            9871296442163056249400302546363744521025539164206578260029364698192743402269435252509709051215855604\
            2420908445417566376750053613026838451200539868024071835700564058356580609039813316041768960026442858\
            8633602009367925090989653958594050674305605073237046266642579872200742707520084663267857767701240753\
            4635586751296878290128102500021088608977427129490272597117387024190178105754705293062159206928090105\
            064136416860085197928",
            ],
        ),
    ];
    for (handed, [first, letters, digits]) in golden {
        assert_eq!(link::decode_all(first), Ok(HandedOn::only(handed.setup.clone())));
        assert_eq!(link::decode_all(letters), Ok(handed.clone()));
        assert_eq!(link::decode_all(digits), Ok(handed.clone()));
        // They are made as they were, too: a link that is already shared is known again.
        assert_eq!(link::encode(&handed.setup), first);
        assert_eq!(text(&handed, Spelling::Letters), letters);
        assert_eq!(text(&handed, Spelling::Digits), digits);
    }
}
