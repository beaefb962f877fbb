//! The page's parts and the browser's, in a real browser.
#![cfg(target_arch = "wasm32")]

use lampladder_core::link;
use lampladder_core::setup::Setup;
use lampladder_core::supply::Supply;
use lampladder_web::app::{App, AppProps};
use lampladder_web::bench::{Bench, Stage, Theme};
use lampladder_web::browser::{fragment, storage, theme};
use lampladder_web::words::english;
use wasm_bindgen::JsCast;
use wasm_bindgen_futures::JsFuture;
use wasm_bindgen_test::{wasm_bindgen_test, wasm_bindgen_test_configure};
use web_sys::{
    Document, Element, HtmlCanvasElement, HtmlElement, HtmlInputElement, InputEvent, InputEventInit,
};
use yew::{AppHandle, scheduler};

wasm_bindgen_test_configure!(run_in_browser);

/// The page in the test's document; taken down again when dropped.
struct Page(Option<AppHandle<App>>);

impl Drop for Page {
    fn drop(&mut self) {
        if let Some(app) = self.0.take() {
            app.destroy();
        }
    }
}

fn document() -> Document {
    web_sys::window().and_then(|window| window.document()).expect("a document")
}

/// Opens the page with the elements that static/index.html gives it.
async fn open(bench: Bench) -> Page {
    // Beside what the test runner writes into the document, not in its place.
    let place = document().get_element_by_id("place").unwrap_or_else(|| {
        let place = document().create_element("div").expect("an element");
        place.set_id("place");
        document().body().expect("a body").append_child(&place).expect("it is in");
        place
    });
    place.set_inner_html(
        "<main id=cautions><h1 id=cautions-title- tabindex=-1>c</h1><div id=cautions-foot></div></main><div id=app></div><style>canvas { width: 300px; height: 290px } :root { --ink: #101010; --dim: #404040; --line: #808080; --brass: #8a5a00; --panel: #ffffff }</style>",
    );
    let root = document().get_element_by_id("app").expect("just made");
    let app = yew::Renderer::<App>::with_root_and_props(root, AppProps { bench }).render();
    settle().await;
    Page(Some(app))
}

async fn open_bench() -> Page {
    let bench = Bench::with(Setup::example().expect("in range"), english()).expect("goes together");
    open(Bench { stage: Stage::Bench, ..bench }).await
}

/// Lets everything happen that is due, up to two frames on.
async fn settle() {
    for _ in 0..2 {
        scheduler::flush().await;
        let frame = js_sys::Promise::new(&mut |resolve, _| {
            let window = web_sys::window().expect("a window");
            window.request_animation_frame(&resolve).expect("a frame");
        });
        JsFuture::from(frame).await.expect("a frame comes");
    }
}

fn find(testid: &str) -> Option<Element> {
    document().query_selector(&format!("[data-testid='{testid}']")).expect("a selector")
}

fn part(testid: &str) -> HtmlElement {
    find(testid).unwrap_or_else(|| panic!("no {testid}")).unchecked_into()
}

fn text(testid: &str) -> String {
    part(testid).text_content().unwrap_or_default()
}

async fn click(testid: &str) {
    part(testid).click();
    settle().await;
}

async fn type_into(testid: &str, text: &str) {
    let input: HtmlInputElement = part(testid).unchecked_into();
    input.set_value(text);
    let init = InputEventInit::new();
    init.set_bubbles(true);
    let event = InputEvent::new_with_event_init_dict("input", &init).expect("an event");
    input.dispatch_event(&event).expect("it goes off");
    settle().await;
}

fn amps() -> f64 {
    let value = part("result-amps").get_attribute("data-value").expect("a value");
    value.parse().expect("a number")
}

#[wasm_bindgen_test]
async fn nothing_shows_before_the_cautions_are_accepted() {
    let bench = Bench::with(Setup::example().expect("in range"), english()).expect("goes together");
    let _page = open(bench).await;
    let stage = || document().document_element().and_then(|root| root.get_attribute("data-stage"));
    assert!(find("result-amps").is_none());
    assert_eq!(stage().as_deref(), Some("cautions"));
    click("accept").await;
    assert!(find("result-amps").is_some() && find("reminder").is_some());
    assert_eq!(stage().as_deref(), Some("bench"));
    assert!(storage::read_for_visit(storage::ACCEPTED).is_some());
    click("open-cautions").await;
    assert_eq!(stage().as_deref(), Some("cautions"));
}

#[wasm_bindgen_test]
async fn typing_changes_the_answer_the_address_and_what_is_kept() {
    let _page = open_bench().await;
    let before = amps();
    click("edit-bank").await;
    type_into("field-lamp-watts", "100 W").await;
    assert!(amps() > before);
    let linked = link::decode(&fragment::read().expect("a fragment")).expect("a link");
    assert_eq!(linked.bank.groups()[0][0].rated_watts(), 100.0);
    assert_eq!(storage::read(storage::SETUP), fragment::read());
    let field: HtmlInputElement = part("field-lamp-watts").unchecked_into();
    assert_eq!(field.value(), "100 W");
}

#[wasm_bindgen_test]
async fn a_wrong_number_says_so_beside_its_field() {
    let _page = open_bench().await;
    let before = amps();
    click("edit-supply").await;
    for (typed, said) in
        [("1e300", "Supply volts must be from"), ("", "Supply volts is empty"), ("5 A", "in V")]
    {
        type_into("field-supply-volts", typed).await;
        assert!(text("error-supply-volts").contains(said), "{typed}: {}", text("error-supply-volts"));
        assert_eq!(part("field-supply-volts").get_attribute("aria-invalid").as_deref(), Some("true"));
        assert!(find("stale").is_some());
        assert_eq!(amps(), before);
    }
    click("step-supply-volts-more").await;
    type_into("field-supply-volts", "120").await;
    assert!(find("error-supply-volts").is_none() && find("stale").is_none());
}

#[wasm_bindgen_test]
async fn every_field_has_a_label_and_every_button_a_name() {
    let _page = open_bench().await;
    for editor in ["edit-supply", "edit-bank", "edit-equipment"] {
        click(editor).await;
        for (selector, named) in [("input", false), ("button", true)] {
            let all = document().query_selector_all(&format!("#place {selector}")).expect("a selector");
            assert!(all.length() > 0);
            for index in 0..all.length() {
                let element: Element = all.item(index).expect("in range").unchecked_into();
                let label = document().query_selector(&format!("label[for='{}']", element.id()));
                let text = element.text_content().unwrap_or_default();
                let name = element.get_attribute("aria-label").unwrap_or(text);
                let ok = if named { !name.trim().is_empty() } else { label.expect("a selector").is_some() };
                assert!(ok, "{}", element.outer_html());
            }
        }
        click("done").await;
        assert!(find("sheet").is_none());
    }
}

#[wasm_bindgen_test]
async fn an_led_is_refused_with_the_reason() {
    let _page = open_bench().await;
    let before = amps();
    click("edit-bank").await;
    click("kind-led").await;
    assert!(text("refusal").contains("LED"));
    assert_eq!(amps(), before);
    click("kind-halogen").await;
    assert!(find("refusal").is_none());
}

#[wasm_bindgen_test]
async fn another_address_brings_its_set_up_and_a_bad_one_a_note() {
    let _page = open_bench().await;
    let location = web_sys::window().expect("a window").location();
    let mut setup = Setup::example().expect("in range");
    setup.supply = Supply::new(120.0, 60.0, 0.0).expect("in range");
    let link = link::encode(&setup);
    location.set_hash(&link).expect("an address");
    settle().await;
    settle().await;
    assert!(text("edit-supply").starts_with("120"), "{}", text("edit-supply"));
    location.set_hash("9newer").expect("an address");
    settle().await;
    settle().await;
    assert!(text("note").contains("newer version"));
    assert_eq!(fragment::read().as_deref(), Some("9newer"), "a bad link is not overwritten by itself");
    assert!(text("edit-supply").starts_with("120"));
}

#[wasm_bindgen_test]
async fn the_chart_is_drawn_as_fine_as_the_screen() {
    let _page = open_bench().await;
    click("tab-curve").await;
    settle().await;
    let canvas: HtmlCanvasElement = part("chart").unchecked_into();
    assert!(canvas.width() >= 600, "{} pixels for 300", canvas.width());
    let context = canvas.get_context("2d").expect("2d").expect("a context");
    let context: web_sys::CanvasRenderingContext2d = context.unchecked_into();
    let pixels = context
        .get_image_data(0.0, 0.0, f64::from(canvas.width()), f64::from(canvas.height()))
        .expect("pixels")
        .data();
    let first = &pixels[..4];
    let drawn = pixels.chunks(4).filter(|pixel| *pixel != first).count();
    assert!(drawn > 1000, "{drawn} pixels differ from the ground");
    // The same numbers beside it.
    assert!(text("crossings").contains("Healthy") && text("bank-curve").contains("230"));
}

#[wasm_bindgen_test]
async fn readings_are_typed_tapped_and_kept_even_where_nothing_stores_them() {
    // No reckoner in this document: the panel says so, and goes on with what it can.
    let _page = open_bench().await;
    click("tab-seen").await;
    assert!(text("verdict").contains("could not be loaded"), "{}", text("verdict"));
    assert!(part("keep").has_attribute("disabled"));
    type_into("field-read-bank-volts", "28,5 V").await;
    type_into("field-read-amps", "160").await;
    assert!(text("error-read-amps").contains("no unit"));
    click("meaning-1").await;
    let amps: HtmlInputElement = part("field-read-amps").unchecked_into();
    assert_eq!(amps.value(), "160 mA");
    assert!(find("error-read-amps").is_none());
    click("look-dull-red").await;
    assert_eq!(part("look-dull-red").get_attribute("aria-pressed").as_deref(), Some("true"));
    click("keep").await;
    for word in ["28.5", "0.16", "dull red", "60"] {
        assert!(text("kept").contains(word), "{word}: {}", text("kept"));
    }
    assert!(text("log-trouble").contains("Not stored"), "{}", text("log-trouble"));
    type_into("note-text", "hums").await;
    click("empty").await;
    assert_eq!(part("field-read-bank-volts").unchecked_into::<HtmlInputElement>().value(), "");
    click("delete").await;
    assert!(find("kept").is_none());
    click("undo").await;
    assert_eq!(part("note-text").unchecked_into::<HtmlInputElement>().value(), "hums");
    click("undo").await;
    assert_eq!(part("field-read-bank-volts").unchecked_into::<HtmlInputElement>().value(), "28,5 V");
}

#[wasm_bindgen_test]
async fn the_meter_is_kept() {
    let _page = open_bench().await;
    click("tab-seen").await;
    click("meter").await;
    click("meter-2").await;
    click("averaging").await;
    assert_eq!(storage::read(storage::METER).as_deref(), Some("1 0.5 3 20000 a"));
    click("meter-0").await;
    click("true-rms").await;
    assert_eq!(storage::read(storage::METER).as_deref(), Some("1 1 5 2000 t"));
}

#[wasm_bindgen_test]
async fn lamps_are_tapped_into_the_drawer_and_kept_on_the_phone() {
    let _page = open_bench().await;
    click("tab-ladder").await;
    assert!(part("size-60-less").has_attribute("disabled") && part("go-on").has_attribute("disabled"));
    click("size-60-more").await;
    click("size-60-more").await;
    click("size-25-more").await;
    assert!(text("step-lamps").contains("2\u{a0}× 60"), "{}", text("step-lamps"));
    let kept = link::decode_stock(&storage::read(storage::STOCK).expect("kept")).expect("a stock");
    assert_eq!(kept.lamp_count(), 3);
    click("size-25-less").await;
    let kept = link::decode_stock(&storage::read(storage::STOCK).expect("kept")).expect("a stock");
    assert_eq!(kept.lamp_count(), 2);
    // There is no reckoner beside this page, and that is said.
    assert!(text("step-rung-0").contains("could not be loaded"), "{}", text("step-rung-0"));
    click("go-on").await;
    assert_eq!(part("step-checks").get_attribute("data-progress").as_deref(), Some("now"));
    assert!(storage::read(storage::CLIMB).is_some_and(|kept| kept.starts_with("1\n")));
    type_into("field-insulation-ohms", "0.1M").await;
    assert!(find("forbidden").is_some());
    type_into("field-insulation-ohms", "50M").await;
    assert!(find("forbidden").is_none() && find("verdict-insulation-ohms").is_some());
}

#[wasm_bindgen_test]
async fn a_bad_count_of_lamps_says_so_beside_its_field() {
    let _page = open_bench().await;
    click("tab-ladder").await;
    click("another-lamp").await;
    type_into("field-spare-lamp-watts", "52").await;
    type_into("field-count", "-2").await;
    assert!(text("error-count").contains("from 0 to 99"), "{}", text("error-count"));
    click("put-lamp").await;
    assert!(find("form-another").is_some());
    type_into("field-count", "2").await;
    click("put-lamp").await;
    assert!(find("form-another").is_none() && text("step-lamps").contains("52"));
}

#[wasm_bindgen_test]
async fn the_light_changes_and_is_kept() {
    let _page = open_bench().await;
    let light = || part("theme").get_attribute("data-value").expect("a value");
    let first = light();
    click("theme").await;
    assert_ne!(light(), first);
    let root = document().document_element().expect("a root");
    assert_eq!(root.get_attribute("data-theme").as_deref(), Some(light().as_str()));
    assert_eq!(theme::name(theme::kept()), light());
    theme::apply(Theme::Auto);
}

#[wasm_bindgen_test]
fn the_fragment_is_replaced_without_history() {
    let history = web_sys::window().and_then(|window| window.history().ok()).expect("a history");
    let length = history.length().expect("a length");
    fragment::write("abc");
    assert_eq!((fragment::read().as_deref(), history.length().ok()), (Some("abc"), Some(length)));
}

#[wasm_bindgen_test]
fn what_is_kept_comes_back() {
    assert_eq!(storage::write("lampladder.test", "1"), Ok(()));
    assert_eq!(storage::read("lampladder.test").as_deref(), Some("1"));
    assert_eq!(storage::read("lampladder.none"), None);
    // More than any browser keeps for one page.
    let too_much = "x".repeat(12_000_000);
    assert_eq!(storage::write("lampladder.test", &too_much), Err(storage::NotKept));
}
