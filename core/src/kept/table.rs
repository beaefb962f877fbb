//! Kept readings as a table in text: comma-separated values by RFC 4180, one row a reading.
//!
//! Names and words are those of the JSON contract, in no person's language, and each number's unit stands in its head:
//! the table is for other programs.

use alloc::string::{String, ToString};
use alloc::vec::Vec;

use super::Kept;
use crate::bank::Bank;
use crate::condition::Condition;
use crate::diagnosis::Advice;
use crate::glow::GlowWord;
use crate::link;
use crate::readings::{Behaviour, Response};

/// The head row.
pub const HEADS: [&str; 29] = [
    "kept_utc",
    "rung",
    "mains_V",
    "mains_Hz",
    "mains_ohm",
    "lamps",
    "equipment",
    "plate_V",
    "plate_W",
    "plate_A",
    "plate_VA",
    "plate_power_factor",
    "read_supply_V",
    "read_lamps_V",
    "read_equipment_V",
    "read_A",
    "read_W",
    "read_plug_ohm",
    "look",
    "behaviour",
    "advice",
    "leading_condition",
    "leading_weight",
    "meter_percent",
    "meter_digits",
    "meter_counts",
    "meter_response",
    "note",
    "link",
];

/// The table, its head row first. Rows end with CR LF, the last one too.
pub fn table<'a>(all: impl IntoIterator<Item = &'a Kept>) -> String {
    let mut text = String::new();
    row(&mut text, &HEADS.map(String::from));
    for kept in all {
        row(&mut text, &cells(kept));
    }
    text
}

fn row(text: &mut String, cells: &[String]) {
    for (place, cell) in cells.iter().enumerate() {
        if place > 0 {
            text.push(',');
        }
        // RFC 4180, section 2, rules 5 to 7.
        if cell.contains(['"', ',', '\r', '\n']) {
            text.push('"');
            text.push_str(&cell.replace('"', "\"\""));
            text.push('"');
        } else {
            text.push_str(cell);
        }
    }
    text.push_str("\r\n");
}

fn cells(kept: &Kept) -> Vec<String> {
    let spec = kept.spec();
    let number = |value: Option<f64>| value.map_or_else(String::new, |value| value.to_string());
    let name = |name: Option<&str>| String::from(name.unwrap_or_default());
    let (supply, plate) = (&spec.setup.supply, spec.setup.plate.spec());
    let response = match spec.meter.response {
        Response::TrueRms => "true-rms",
        Response::Averaging => "averaging",
    };
    let mut cells = Vec::with_capacity(HEADS.len());
    cells.push(utc(spec.milliseconds));
    cells.push(spec.rung.map_or_else(String::new, |rung| rung.to_string()));
    cells.extend([supply.volts(), supply.hertz(), supply.ohms()].map(|value| value.to_string()));
    cells.push(lamps(&spec.setup.bank));
    cells.push(plate.family.name().to_string());
    cells.push(plate.volts.to_string());
    cells.extend([plate.watts, plate.amps, plate.volt_amps, plate.power_factor].map(number));
    cells.extend(spec.numbers.map(number));
    cells.push(name(spec.look.map(GlowWord::name)));
    cells.push(name(spec.behaviour.map(Behaviour::name)));
    cells.push(name(spec.verdict.map(|verdict| verdict.advice).map(Advice::name)));
    cells.push(name(spec.verdict.map(|verdict| verdict.leader).map(Condition::name)));
    cells.push(number(spec.verdict.map(|verdict| verdict.weight)));
    cells.extend([spec.meter.percent, spec.meter.digits, spec.meter.counts].map(|value| value.to_string()));
    cells.push(response.to_string());
    cells.push(harmless(&spec.note));
    cells.push(link::encode(&spec.setup));
    cells
}

/// A text that no spreadsheet takes for a formula: the note may come from somebody else's file.
fn harmless(text: &str) -> String {
    let formula = text.starts_with(['=', '+', '-', '@', '\t', '\r']);
    if formula { String::from("'") + text } else { text.to_string() }
}

/// The bank: `||` between lamps in parallel, ` + ` between groups in series.
fn lamps(bank: &Bank) -> String {
    let mut text = String::new();
    for (place, group) in bank.groups().iter().enumerate() {
        text.push_str(if place > 0 { " + " } else { "" });
        for (place, lamp) in group.iter().enumerate() {
            text.push_str(if place > 0 { " || " } else { "" });
            text.push_str(&lamp.rated_watts().to_string());
            text.push_str(" W ");
            text.push_str(&lamp.rated_volts().to_string());
            text.push_str(" V");
        }
    }
    text
}

/// A time as ISO 8601 writes it, to the millisecond. Days to a date by the Gregorian rules: eras of 400 years, which are
/// 146,097 days, counted from 1 March of the year 0.
fn utc(milliseconds: f64) -> String {
    #[expect(clippy::cast_possible_truncation, clippy::cast_sign_loss, reason = "from 0 to 8.64e15")]
    let whole = milliseconds as u64;
    let (days, time) = (whole / 86_400_000, whole % 86_400_000);
    // From 1 March of the year 0 to 1 January 1970.
    let days = days + 719_468;
    let (era, day_of_era) = (days / 146_097, days % 146_097);
    let year_of_era = (day_of_era - day_of_era / 1460 + day_of_era / 36_524 - day_of_era / 146_096) / 365;
    let day_of_year = day_of_era - (365 * year_of_era + year_of_era / 4 - year_of_era / 100);
    // Months from March on have 31, 30, 31, 30, 31 days, again and again.
    let month_from_march = (5 * day_of_year + 2) / 153;
    let day = day_of_year - (153 * month_from_march + 2) / 5 + 1;
    let month = if month_from_march < 10 { month_from_march + 3 } else { month_from_march - 9 };
    let year = era * 400 + year_of_era + u64::from(month <= 2);
    let (hours, minutes) = (time / 3_600_000, time / 60_000 % 60);
    let (seconds, thousandths) = (time / 1000 % 60, time % 1000);
    alloc::format!("{year:04}-{month:02}-{day:02}T{hours:02}:{minutes:02}:{seconds:02}.{thousandths:03}Z")
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::kept::tests::example;

    #[test]
    fn dates_are_those_of_the_calendar() {
        // Each by `date -u -d @SECONDS`.
        for (seconds, date) in [
            (0.0, "1970-01-01T00:00:00.000Z"),
            (951_782_400.0, "2000-02-29T00:00:00.000Z"),
            (951_868_799.0, "2000-02-29T23:59:59.000Z"),
            (1_709_251_199.0, "2024-02-29T23:59:59.000Z"),
            (1_796_128_200.123, "2026-12-01T12:30:00.123Z"),
            (4_107_542_399.0, "2100-02-28T23:59:59.000Z"),
            (4_107_542_400.0, "2100-03-01T00:00:00.000Z"),
        ] {
            assert_eq!(utc(seconds * 1000.0), date);
        }
    }

    #[test]
    fn a_row_says_it_all_and_quotes_what_it_must() {
        let mut spec = example();
        spec.note = String::from("first line\nsecond, \"quoted\"");
        let kept = Kept::from_spec(spec).expect("in range");
        let text = table([&kept]);
        let (head, row) = text.split_once("\r\n").expect("two rows");
        assert_eq!(head.split(',').count(), HEADS.len());
        let expected = "2026-12-01T12:30:00.123Z,2,230,50,0,60 W 230 V,transformer-supply,230,45,,,,231,67.5,,0.16,,,dull \
                        red,flash-then-dim,go-on,healthy,0.8734,1,5,2000,true-rms,\"first line\nsecond, \
                        \"\"quoted\"\"\",";
        assert!(row.starts_with(expected), "{row}");
    }

    #[test]
    fn a_note_is_no_formula() {
        assert_eq!(harmless("=HYPERLINK(1)"), "'=HYPERLINK(1)");
        assert_eq!(harmless("2 = two"), "2 = two");
    }
}
