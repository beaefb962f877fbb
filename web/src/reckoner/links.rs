//! Handing on: the link of a bench with its QR code, what a link holds, and kept readings as a table. No work that takes
//! longer than a frame, but the reckoner's program has room for it.

mod code;
pub mod records;
mod steps;

use lampladder_core::hand_on::HandedOn;
use lampladder_core::kept::{Kept, table};
use lampladder_core::link::{self, LinkError, Spelling};
use serde::{Deserialize, Serialize};

pub use code::Code;

use self::records::Found;
use crate::log::Record;

/// What is wanted.
#[derive(Debug, Clone, PartialEq, Serialize, Deserialize)]
pub enum Wanted {
    /// The link of a bench, and its code.
    Link(Bench),
    /// What a link holds beside its set-up; the decimal mark in which its owner writes.
    Open(String, char),
    /// These readings for a spreadsheet.
    Table(Vec<Record>),
    /// These readings as a file of ours.
    File(Vec<Record>),
    /// The readings in a file.
    Read(String),
}

/// A bench that is handed on.
#[derive(Debug, Clone, PartialEq, Serialize, Deserialize)]
pub struct Bench {
    /// The page's address up to the `#`.
    pub address: String,
    /// The bench, as in a link.
    pub setup: String,
    /// The lamps that there are, and the position on the ladder, as the phone keeps them.
    pub ladder: Option<(String, String)>,
    /// Kept readings.
    pub log: Vec<Record>,
}

/// What there is to tell.
#[derive(Debug, Clone, PartialEq, Serialize, Deserialize)]
pub enum News {
    /// The link.
    Link(Link),
    /// What a link held.
    Opened(Opened),
    /// It holds nothing that can be read.
    Unopened(LinkError),
    /// A file to be saved.
    Text(String),
    /// The readings of a file.
    Read(Result<Found, records::Unread>),
}

/// A link and its code, each as far as it is short enough.
#[derive(Debug, Clone, PartialEq, Serialize, Deserialize)]
pub struct Link {
    /// Address and all.
    pub text: Option<String>,
    /// For a camera.
    pub code: Option<Code>,
}

/// What a link held beside its set-up.
#[derive(Debug, Clone, Default, PartialEq, Serialize, Deserialize)]
pub struct Opened {
    /// The lamps that there are, as the phone keeps them.
    pub stock: Option<String>,
    /// The position on the ladder, as the phone keeps it.
    pub climb: Option<String>,
    /// Kept readings.
    pub log: Vec<Record>,
}

/// The answer; `None` where the question is of another version, or is for whoever has a browser.
pub fn answer(wanted: &Wanted) -> Option<News> {
    Some(match wanted {
        Wanted::Link(bench) => News::Link(link(bench)?),
        Wanted::Open(text, decimal) => match link::decode_all(text) {
            Ok(handed) => News::Opened(opened(&handed, *decimal)),
            Err(error) => News::Unopened(error),
        },
        Wanted::Table(all) => {
            // A record that was stored by a page with wider limits is left out rather than all of them.
            let kept: Vec<Kept> = all.iter().filter_map(|record| records::kept(record).ok()).collect();
            News::Text(table(&kept))
        }
        Wanted::File(_) | Wanted::Read(_) => return None,
    })
}

fn link(bench: &Bench) -> Option<Link> {
    let setup = link::decode(&bench.setup).ok()?;
    let (stock, position) = match &bench.ladder {
        Some((stock, climb)) => (Some(link::decode_stock(stock).ok()?), Some(steps::position(climb, &setup))),
        None => (None, None),
    };
    let log = bench.log.iter().filter_map(|record| records::kept(record).ok()).collect();
    let handed = HandedOn { setup, stock, position: position.flatten(), log };
    let address = format!("{}#", bench.address);
    let text = link::encode_all(&handed, Spelling::Letters).ok();
    let digits = link::encode_all(&handed, Spelling::Digits).ok();
    Some(Link {
        text: text.map(|text| format!("{address}{text}")),
        code: digits.and_then(|digits| Code::of(&address, &digits)),
    })
}

fn opened(handed: &HandedOn, decimal: char) -> Opened {
    Opened {
        stock: handed.stock.as_ref().map(link::encode_stock),
        climb: handed.position.as_ref().map(|position| steps::climb(position, &handed.setup, decimal)),
        log: handed.log.iter().map(records::record).collect(),
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use lampladder_core::lamp::Lamp;
    use lampladder_core::setup::Setup;
    use lampladder_core::stock::Stock;

    use crate::climb::{Climb, Stand, equipment};
    use crate::draft::Slot;
    use crate::entry::Entry;
    use crate::log::tests::record;

    fn bench() -> Bench {
        Bench {
            address: String::from("https://bench.example.org/tools/lampladder/"),
            setup: link::encode(&Setup::example().expect("in range")),
            ladder: None,
            log: Vec::new(),
        }
    }

    fn link_of(bench: &Bench) -> Link {
        match answer(&Wanted::Link(bench.clone())) {
            Some(News::Link(link)) => link,
            other => panic!("{other:?}"),
        }
    }

    fn opened_of(link: &Link) -> Opened {
        let text = link.text.as_ref().expect("short");
        let fragment = text.split_once('#').expect("an address").1;
        match answer(&Wanted::Open(fragment.to_owned(), ',')) {
            Some(News::Opened(opened)) => opened,
            other => panic!("{other:?}"),
        }
    }

    #[test]
    fn a_set_up_alone_holds_nothing_else() {
        let link = link_of(&bench());
        assert!(link.code.is_some());
        assert_eq!(opened_of(&link), Opened::default());
    }

    #[test]
    fn lamps_position_and_readings_arrive_as_the_phone_keeps_them() {
        let setup = Setup::example().expect("in range");
        let stock = Stock::new([(Lamp::new(230.0, 60.0).expect("a stock size"), 2.0)]).expect("two lamps");
        let mut climb = Climb { at: Stand::Rung(1), looked: true, lead: 2, ..Climb::default() };
        for (entry, text) in [
            (Entry::InsulationOhms, "OL"),
            (Entry::PlugOhms, "1k2"),
            (Entry::Farads, "47 µF"),
            (Entry::Count, "3"),
        ] {
            climb.set(entry, text);
        }
        let bench = Bench {
            ladder: Some((link::encode_stock(&stock), climb.kept(&equipment(&setup)))),
            log: vec![Record { setup: link::encode(&setup), ..record(5.0) }],
            ..bench()
        };
        let opened = opened_of(&link_of(&bench));
        assert_eq!(opened.stock, Some(link::encode_stock(&stock)));
        assert_eq!(opened.log, bench.log);
        let there = Climb::restored(opened.climb.as_deref().expect("a position"), &equipment(&setup));
        assert_eq!((there.at, there.looked, there.lead, there.class), (Stand::Rung(1), true, 2, climb.class));
        for (entry, text) in [
            (Entry::InsulationOhms, "OL"),
            (Entry::PlugOhms, "1200"),
            (Entry::Farads, "47 µF"),
            (Entry::Count, ""),
        ] {
            assert_eq!(there.text(entry), text, "{}", Slot::Entry(entry).unit());
        }
        assert_eq!(there.off, None, "nobody waits here");
    }

    #[test]
    fn many_readings_make_no_code_and_very_many_no_link() {
        let setup = link::encode(&Setup::example().expect("in range"));
        let of = |count: u32| {
            let one =
                |id: u32| Record { setup: setup.clone(), note: "hum ".repeat(20), ..record(f64::from(id)) };
            link_of(&Bench { log: (0..count).map(one).collect(), ..bench() })
        };
        assert!(of(3).code.is_some());
        let many = of(20);
        assert!(many.text.is_some() && many.code.is_none());
        assert_eq!(of(2000), Link { text: None, code: None });
    }

    #[test]
    fn a_link_of_another_version_is_said_to_be_so() {
        let open = |text: &str| answer(&Wanted::Open(text.to_owned(), '.'));
        assert_eq!(open("4abc"), Some(News::Unopened(LinkError::Newer)));
        assert_eq!(open("2abc"), Some(News::Unopened(LinkError::Damaged)));
        assert_eq!(answer(&Wanted::Link(Bench { setup: String::from("9"), ..bench() })), None);
    }

    #[test]
    fn a_table_has_a_row_for_each_reading() {
        let setup = link::encode(&Setup::example().expect("in range"));
        let all = vec![Record { setup: setup.clone(), ..record(1.0) }, Record { setup, ..record(2.0) }];
        let Some(News::Text(text)) = answer(&Wanted::Table(all)) else { panic!("no table") };
        assert_eq!(text.lines().count(), 3);
    }
}
