//! The equipment's editor: its family by picture, and its rating plate.

use lampladder_core::plate::Family;
use yew::{Html, function_component, html};

use super::{PanelProps, send};
use crate::bench::Msg;
use crate::draft::Slot;
use crate::parts::field::Field;
use crate::parts::picture;

/// Family and plate.
#[function_component]
pub fn EquipmentEditor(props: &PanelProps) -> Html {
    let bench = &props.bench;
    let words = bench.words();
    let family = bench.draft.family;
    let hint = (words.edit.power_factor_hint)(&words.numerals.plain(family.usual_power_factor()));
    let field = |slot| html! { <Field bench={bench.clone()} {slot} /> };
    // A printed power factor enters the results of the plain family only.
    let wants_power_factor = family == Family::Plain || !bench.draft.text(Slot::PlatePowerFactor).is_empty();
    html! {
        <>
            <div class="families" role="group" aria-label={words.edit.what}>
                { for Family::ALL.into_iter().map(|family| {
                    let names = (words.family)(family);
                    html! {
                        <button type="button" class="family" data-testid={format!("family-{}", family.name())}
                            aria-pressed={if family == bench.draft.family { "true" } else { "false" }}
                            onclick={send(bench, Msg::Family(family))}>
                            <svg viewBox="0 0 48 36" aria-hidden="true" focusable="false">{ picture::family(family) }</svg>
                            <b>{ names.name }</b>
                            <small>{ names.examples }</small>
                        </button>
                    }
                }) }
            </div>
            <h3>{ words.edit.plate }</h3>
            <div class="pair">
                { field(Slot::PlateWatts) }
                { field(Slot::PlateVolts) }
            </div>
            if wants_power_factor {
                <Field bench={bench.clone()} slot={Slot::PlatePowerFactor} {hint} />
            }
        </>
    }
}
