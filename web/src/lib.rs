//! The page of Lampladder: what a repairer types, and what core says to it, on a phone first.
//!
//! No physics here. [`bench`] is the one state and its pure reducer; [`browser`] is all that touches the browser;
//! [`panels`], [`charts`] and [`parts`] draw; [`words`] has every text; [`mod@format`] turns numbers into text.
//!
//! # Names for tests
//! Tests of the whole page find its parts by `data-testid`. They are kept stable:
//!
//! | name | what |
//! |---|---|
//! | `cautions`, `accept` | the cautions (in static/index.html) and the button under them |
//! | `open-cautions`, `reminder`, `theme`, `language` | header; `theme` has `data-value` `auto`, `paper` or `dusk` |
//! | `edit-supply`, `edit-bank`, `edit-equipment` | the parts of the loop |
//! | `result-amps` | the current; `data-value`, `data-low`, `data-high` hold it in full |
//! | `stale` | there while the result is not that of what is typed |
//! | `voltage-bar`, `voltage-why` | the bar and its explanation |
//! | `cell-healthy`, `cell-overloaded`, `cell-shorted` | with `data-amps`, `data-bank-volts`, `data-load-volts`, `data-glow` |
//! | `advice`, `assumes`, `stale-note`, `lamp-caution`, `warning`, `too-powerful` | the sentence to act on and what stands around it |
//! | `life` | cells of lamp life in the details |
//! | `note`, `dismiss`, `use-kept`, `use-new` | notes; takes over what is kept, a new version |
//! | `sheet`, `done` | the editor |
//! | `field-*`, `error-*`, `step-*-more`, `step-*-less` | `supply-volts`, `supply-hertz`, `supply-ohms`, `plate-volts`, `plate-watts`, `plate-amps`, `plate-volt-amps`, `plate-power-factor`, `detail-start-volts` and so on, `lamp-volts`, `lamp-watts`, `lamp-lumens`, `lamp-cold-ohms`, `point-0-volts`, `point-0-amps` |
//! | `quick-volts-230`, `quick-hertz-50`, `quick-hertz-0`, `follow-supply` | one tap in the supply's editor |
//! | `lamp-0-0` | the lamp of a group, in the bank's editor |
//! | `add-parallel`, `add-series`, `remove-lamp` | |
//! | `quick-watts-60`, `quick-lamp-volts-230` | one tap for a lamp |
//! | `kind-ordinary`, `kind-halogen`, `kind-led`, `kind-compact-fluorescent`, `kind-carbon-filament`, `refusal` | kinds of lamp |
//! | `fill-auto`, `fill-vacuum`, `fill-gas`, `add-point`, `remove-point-0`, `lamp-life` | more of a lamp |
//! | `choose-family`, then `family-transformer-supply`, `family-heater`, `family-plain` and so on | kinds of equipment |
//! | `refused-microwave`, `refused-medical`, `refused-three-phase` | what the page is not for; the reason is `refusal` |
//! | `tab-switch-on`, `replay` | the first seconds; `data-busy` while they are worked out, `data-milliseconds` spent on the healthy run |
//! | `story`, `beside-shorted` and so on | what to look for; the conditions to set beside the healthy one |
//! | `scene-healthy`, `scene-other` | with `data-condition`, `data-glow`, `data-kelvin`, `data-amps` at the present moment |
//! | `play`, `scrubber`, `seconds-chart` | `play` has `data-state` `playing` or `still`, `scrubber` `data-seconds` and `data-end` |
//! | `moments`, `moment-20` and so on | the strip of those who want less motion; milliseconds |
//! | `slow`, `span-3`, `closing-crest`, `closing-zero`, `closing-worst` | how it plays, how long, when the switch closes |
//! | `tab-seen`, `seen` | readings; `data-busy` while they are judged, `data-milliseconds` spent on that |
//! | `verdict`, `because` | the sentence, with `data-advice` `go-on`, `stop` or `measure-first`, `data-leader`, `data-weight`; what it rests on |
//! | `left-out`, `clash`, `next-line` | readings that cannot be read; that cannot belong together; the next one |
//! | `field-read-*`, `error-read-*`, `meaning-0`, `meaning-1` | `supply-volts`, `bank-volts`, `load-volts`, `amps`, `load-watts`, `plug-ohms`; the two meanings of a number without a unit |
//! | `look-dull-red`, `behaves-flash-then-dim` and so on | taps |
//! | `meter`, `meter-0`, `field-meter-percent`, `field-meter-digits`, `field-meter-counts`, `true-rms`, `averaging` | the meter |
//! | `weight-healthy` and so on, `weight-rest`, `numbers`, `number-amps` and so on, `next` | with `data-value`, and numbers with `data-low`, `data-high` |
//! | `keep`, `empty`, `undo`, `log`, `kept`, `kept-readings`, `note-text`, `delete`, `log-trouble`, `log-foreign` | the log |
//! | `surge`, `moments-table`, `fuse`, `fuse-more`, `fuse-less`, `fuse-table` | the figures, the fuse check |
//! | `tab-ladder`, `ladder` | with `data-busy` until the rungs are known, `data-complete` once all is, `data-milliseconds` spent on it |
//! | `ladder-equipment`, `restarted`, `ladder-refused` | the equipment's editor; a note that it began again; why there is no ladder |
//! | `step-lamps`, `step-checks`, `step-rung-0`, `step-mains`, `step-after` | heads of the steps, with `data-progress` `done`, `now` or `next` |
//! | `go-on`, `back-0`, `afresh` | from step to step |
//! | `size-60-more`, `size-60-less`, `size-other-0-more` | lamps that are owned: a size in the shops, a kind of the stock |
//! | `put-back` | puts the last kind in again that was tapped away |
//! | `another-lamp`, `form-another`, `put-lamp`, `drawer-refused` | a lamp by its rating, in `field-spare-lamp-watts` and so on, and `field-count` |
//! | `measure`, `measure-0`, `form-measure`, `shrinkage` | measuring one of a kind |
//! | `unknown-lamp`, `form-unknown`, `fit-0`, `no-fit` | a lamp without a legible rating, by `field-unknown-cold-ohms`, `-volts`, `-amps`, `-printed-volts` |
//! | `missing-lamp`, `falls-short` | the lamp that would help most; the last rung does not run it |
//! | `looked-over`, `class-I`, `lead-0`, `verdict-plug-ohms`, `over-plug-ohms`, `skipped`, `forbidden` | checks, in `field-protective-ohms`, `field-insulation-ohms`, `field-plug-ohms` |
//! | `use-bank-0`, `in-loop`, `to-readings` | the rung's lamps into the loop; on to what is seen |
//! | `measure-first`, `waits`, `power-off`, `countdown`, `stop-counting` | after power, with `field-reservoir-farads`, `field-bleed-ohms`, `field-reservoir-volts`; `countdown` has `data-seconds` |
//! | `tab-hand-on`, `hand-on` | link, code, card and files |
//! | `with-ladder`, `with-log`, `link`, `copy`, `copied`, `share`, `link-too-long`, `hand-on-lost` | what goes along; the link |
//! | `code`, `code-too-large` | the QR code, with `data-version` |
//! | `print`, `no-rungs`, `card` | the card, which shows on paper only |
//! | `save-csv`, `save-json`, `read-json`, `file`, `file-told`, `file-error` | kept readings in files |
//! | `tab-expect`, `tab-curve`, `chart`, `crossings`, `bank-curve` | panels |

pub mod advice;
pub mod answers;
pub mod app;
pub mod bench;
pub mod browser;
pub mod charts;
pub mod climb;
mod custody;
pub mod describe;
pub mod doubt;
pub mod draft;
pub mod drawer;
pub mod entry;
pub mod flare;
pub mod format;
mod keeper;
pub mod log;
pub mod meter;
pub mod opening;
pub mod panels;
pub mod parts;
mod reading;
pub mod reckoner;
mod reduce;
pub mod replay;
pub mod rest;
pub mod seen;
pub mod start;
pub mod step;
pub mod story;
pub mod theatre;
pub mod visit;
pub mod words;

use app::{App, AppProps};
use browser::{cautions, fresh, language, theme};
use words::Words;

/// Starts the page, as soon as its texts are there; without them the cautions stand alone and say so.
pub fn start() {
    language::speak(|words| match words {
        Some(words) => begin(words),
        None => cautions::lost(),
    });
}

/// Without the elements of static/index.html there is nothing to start.
fn begin(words: &'static Words) {
    let Some(root) = cautions::element(cautions::APP) else { return };
    let Some(bench) = start::bench(words) else { return };
    theme::apply(bench.theme);
    cautions::started();
    yew::Renderer::<App>::with_root_and_props(root, AppProps { bench }).render();
    fresh::say(fresh::STARTED);
}
