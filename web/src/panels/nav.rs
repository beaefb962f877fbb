//! The panels' list at the foot of the page.

use yew::{Html, function_component, html};

use super::{PanelProps, send};
use crate::bench::{Msg, Tab};

const TABS: [(Tab, &str); 2] = [(Tab::Expect, "tab-expect"), (Tab::Curve, "tab-curve")];

/// The list.
#[function_component]
pub fn Nav(props: &PanelProps) -> Html {
    let bench = &props.bench;
    let words = bench.words();
    html! {
        <nav class="tabs" aria-label={words.panels}>
            { for TABS.into_iter().map(|(tab, testid)| html! {
                <button type="button" class="tab" data-testid={testid} onclick={send(bench, Msg::Go(tab))}
                    aria-current={(tab == bench.tab).then_some("page")}>{ (words.tab)(tab) }</button>
            }) }
        </nav>
    }
}
