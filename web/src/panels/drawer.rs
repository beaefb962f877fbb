//! The drawer of lamps: sizes to tap, lamps of any other rating, lamps that were measured or identified.

use lampladder_core::identify;
use lampladder_core::lamp::Lamp;
use lampladder_core::stock::Owned;

use super::ladder::{go_on, refused};
use super::lamp::{filling, kinds, points, refusal};
use super::send;
use super::supply::more;
use crate::bench::{Bench, BenchHandle, Refused};
use crate::climb::Stand;
use crate::draft::{LampPart, Place, Slot};
use crate::drawer::{Drawer, Form, Shelf, usual_volts};
use crate::entry::Entry;
use crate::parts::el::{El, button, el, place, truth};
use crate::parts::table::{row_head, table, whole};
use crate::parts::{field, picture::sign};
use crate::step::STOCK_WATTS;

const PLUS: &str = "M12 5 V19 M5 12 H19";
const MINUS: &str = "M5 12 H19";

/// A rating as text.
pub(super) fn rating(bench: &Bench, volts: f64, watts: f64) -> String {
    let numerals = bench.words().numerals;
    format!("{} {}", numerals.quantity(volts, "V"), numerals.quantity(watts, "W"))
}

/// A lamp as text; its volts only where they are not the usual ones.
fn lamp_name(bench: &Bench, lamp: &Lamp) -> String {
    let words = bench.words();
    let (volts, watts) = (lamp.rated_volts(), lamp.rated_watts());
    let text = if volts == usual_volts(&bench.setup) {
        words.numerals.quantity(watts, "W")
    } else {
        rating(bench, volts, watts)
    };
    if is_measured(lamp) { words.ladder().measured_lamp(&text) } else { text }
}

fn is_measured(lamp: &Lamp) -> bool {
    lamp.spec().cold_ohms.is_some() || !lamp.spec().points.is_empty()
}

/// All lamps in a few words.
pub(super) fn drawer_short(bench: &Bench) -> String {
    let one = |owned: &Owned| match owned.count() {
        1 => lamp_name(bench, owned.lamp()),
        count => format!("{count}\u{a0}× {}", lamp_name(bench, owned.lamp())),
    };
    let all: Vec<String> = bench.drawer.stock.kinds().iter().map(one).collect();
    if all.is_empty() { bench.words().ladder().no_lamps.to_owned() } else { all.join(", ") }
}

/// The drawer.
pub(super) fn drawer(bench: &BenchHandle) -> Vec<El> {
    let words = bench.words();
    let texts = words.ladder();
    let drawer = &bench.drawer;
    let volts = usual_volts(&bench.setup);
    let hint = texts.tap_sizes(&words.numerals.quantity(volts, "V"));
    let sizes = el("div")
        .class("sizes")
        .each(STOCK_WATTS.map(|watts| size(bench, watts, drawer.count(volts, watts))));
    let kinds = drawer.stock.kinds().iter().enumerate();
    let others = kinds.clone().filter(|(_, owned)| !Drawer::has_button(owned.lamp(), volts));
    let others =
        el("div").class("sizes is-other").each(others.map(|(kind, owned)| other(bench, kind, owned)));
    let measurable = kinds.map(|(kind, owned)| {
        let name = lamp_name(bench, owned.lamp());
        button("choice", format!("measure-{kind}"), send(bench, Shelf::Form(Form::Measure(kind)).into()))
            .set("aria-pressed", truth(drawer.form == Form::Measure(kind)))
            .put("aria-label", texts.measure_one(&name))
            .text(name)
    });
    let measurable = more(texts.measure).test("measure").with(el("div").class("choices").each(measurable));
    let offer = |form: Form, testid: &'static str, text: &'static str| {
        button("offer", testid, send(bench, Shelf::Form(form).into()))
            .set("aria-expanded", truth(drawer.form == form))
            .text(text)
    };
    let form = match drawer.form {
        Form::None => None,
        Form::Another => Some(another(bench)),
        Form::Measure(kind) => Some(measure(bench, kind)),
        Form::Unknown => Some(unknown(bench)),
    };
    let missing = bench.climb.known.missing.flatten().map(|missing| {
        let lamp = rating(bench, missing.rating.volts, missing.rating.watts);
        el("p").class("hint").test("missing-lamp").text(texts.missing(&lamp, &missing.gain))
    });
    let stocked = !drawer.stock.is_empty();
    vec![
        el("p").text(hint),
        sizes,
        others,
        place(drawer.gone().map(|lamp| {
            button("offer", "put-back", send(bench, Shelf::PutBack.into()))
                .text(texts.put_back(&lamp_name(bench, lamp)))
        })),
        // Above what comes when the reckoner has an answer: nothing pushes it away from under a thumb.
        place(go_on(bench, Stand::Lamps, stocked)),
        place(refused(bench)),
        place(missing),
        el("div").class("pair").with(offer(Form::Another, "another-lamp", texts.another)).with(offer(
            Form::Unknown,
            "unknown-lamp",
            texts.unknown,
        )),
        place(stocked.then_some(measurable)),
        place(drawer.refused.map(|error| message("drawer-refused", texts.put_refused(&error).to_owned()))),
        place(form),
    ]
}

fn message(testid: &'static str, text: String) -> El {
    el("p").class("error").set("role", "alert").test(testid).text(text)
}

/// A size in the shops: tapped, there is one more.
fn size(bench: &BenchHandle, watts: f64, count: u8) -> El {
    let numerals = bench.words().numerals;
    let name = numerals.quantity(watts, "W");
    let slug = numerals.plain(watts);
    counted(bench, &name, &slug, count, [Shelf::More(watts), Shelf::Less(watts)])
}

/// A kind that has no button of its own.
fn other(bench: &BenchHandle, kind: usize, owned: &Owned) -> El {
    let name = lamp_name(bench, owned.lamp());
    counted(bench, &name, &format!("other-{kind}"), owned.count(), [Shelf::MoreOf(kind), Shelf::LessOf(kind)])
}

fn counted(bench: &BenchHandle, name: &str, slug: &str, count: u8, [more, less]: [Shelf; 2]) -> El {
    let texts = bench.words().ladder();
    let text = if count == 0 { name.to_owned() } else { format!("{count}×\u{a0}{name}") };
    let class = if count == 0 { "size" } else { "size is-owned" };
    let minus = button("stepper", format!("size-{slug}-less"), send(bench, less.into()))
        .put("aria-label", texts.one(name, false))
        .with(sign(MINUS));
    let minus = if count == 0 { minus.set("disabled", "disabled") } else { minus };
    let plus = button("size-more", format!("size-{slug}-more"), send(bench, more.into()))
        .put("aria-label", texts.one(&text, true))
        .with(el("b").text(text))
        .with(sign(PLUS));
    el("div").class(class).with(minus).with(plus)
}

fn slot(part: LampPart) -> Slot {
    Slot::Lamp(Place::SPARE, part)
}

/// What else may be known of the typed lamp.
fn known(bench: &BenchHandle) -> El {
    let optional = bench.words().edit.optional;
    let known = el("div").class("form").with(field::plain(bench, slot(LampPart::ColdOhms), optional));
    points(bench, known)
}

fn put(bench: &BenchHandle, text: &'static str) -> El {
    button("go-on", "put-lamp", send(bench, Shelf::Put.into())).text(text)
}

fn another(bench: &BenchHandle) -> El {
    let words = bench.words();
    let refused = match bench.refused {
        Some(Refused::Lamp(kind)) => Some(refusal(words.refusal(kind))),
        _ => None,
    };
    let pair = el("div")
        .class("pair")
        .with(field::stepped(bench, slot(LampPart::Watts)))
        .with(field::stepped(bench, slot(LampPart::Volts)));
    el("div")
        .class("form")
        .test("form-another")
        .with(pair)
        .with(field::plain(bench, Slot::Entry(Entry::Count), words.edit.default_hint("1")))
        .with(kinds(bench))
        .with(place(refused))
        .with(more(words.edit.lamp_more).maybe(filling(bench)).with(known(bench)))
        .with(put(bench, words.ladder().put))
}

fn measure(bench: &BenchHandle, kind: usize) -> El {
    let words = bench.words();
    let texts = words.ladder();
    let name = bench.drawer.stock.kinds().get(kind).map(|owned| lamp_name(bench, owned.lamp()));
    el("div")
        .class("form")
        .test("form-measure")
        .with(el("h3").text(texts.measuring(&name.unwrap_or_default())))
        .with(el("p").class("hint").text(texts.measure_how))
        .with(known(bench))
        .with(place(shrinkage(bench)))
        .with(put(bench, texts.put_measured))
}

/// How much narrower the typed lamp's band has become.
fn shrinkage(bench: &Bench) -> Option<El> {
    let words = bench.words();
    let texts = words.ladder();
    let lamp = bench.draft.read_spare().ok().filter(is_measured)?;
    // From hardly warm to its rating.
    let rows = [0.1, 0.3, 0.6, 1.0].into_iter().filter_map(|share| {
        let volts = share * lamp.rated_volts();
        let both = identify::shrinkage(&lamp, volts).ok()?;
        Some(
            el("tr")
                .with(row_head(words.numerals.short_quantity(volts, "V")))
                .with(whole(words.numerals.range(&both.before, "A")))
                .with(whole(words.numerals.range(&both.after, "A")))
                .with(whole(words.numerals.fixed(1.0 / both.ratio(), 1) + "\u{a0}×")),
        )
    });
    let rows: Vec<El> = rows.collect();
    Some(
        el("div").test("shrinkage").with(el("h3").text(texts.shrinks)).with(table(&texts.shrink_heads, rows)),
    )
}

fn unknown(bench: &BenchHandle) -> El {
    let words = bench.words();
    let texts = words.ladder();
    let typed = |entry| field::plain(bench, Slot::Entry(entry), "");
    let found = match &bench.drawer.fits {
        None => bench.measured().map(|_| el("p").class("hint").text(texts.comparing)),
        Some(Err(error)) => Some(message("no-fit", texts.no_fit(error).to_owned())),
        Some(Ok(fits)) => {
            Some(el("div").class("choices").each(fits.iter().enumerate().map(|(index, fit)| {
                let text =
                    texts.fit(&rating(bench, fit.volts, fit.watts), &words.numerals.percent(fit.weight));
                button("choice", format!("fit-{index}"), send(bench, Shelf::Take(index).into())).text(text)
            })))
        }
    };
    el("div")
        .class("form")
        .test("form-unknown")
        .with(el("p").class("hint").text(texts.unknown_how))
        .with(typed(Entry::ColdOhms))
        .with(el("div").class("pair").with(typed(Entry::GlowVolts)).with(typed(Entry::GlowAmps)))
        .with(field::plain(bench, Slot::Entry(Entry::PrintedVolts), words.edit.optional))
        .with(place(found))
}
