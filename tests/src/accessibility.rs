//! The page as people see and hear it who do not see, hear or point as most do: checked by axe-core.

use anyhow::{Context, Result, ensure};
use serde_json::{Value, json};

use crate::browser::Browser;
use crate::surroundings;

/// The rules of WCAG 2.2 at levels A and AA, and what axe-core calls best practice.
const RULES: [&str; 6] = ["wcag2a", "wcag2aa", "wcag21a", "wcag21aa", "wcag22aa", "best-practice"];

/// Fails with the list of violations, if the page has any as it stands.
///
/// # Errors
/// When there are violations, or the checker cannot run.
pub fn check(browser: &Browser, screen: &str) -> Result<()> {
    let axe = surroundings::axe()?;
    // Through DevTools, since a content security policy would rightly refuse a script of ours in the page.
    let loaded = browser.devtools("Runtime.evaluate", json!({"expression": axe}))?;
    ensure!(loaded["exceptionDetails"].is_null(), "axe-core does not load: {loaded}");
    let body = "const done = arguments[arguments.length - 1]; const rules = arguments[0]; \
                window.axe.run(document, {runOnly: {type: 'tag', values: rules}, resultTypes: ['violations']}) \
                .then((r) => done({violations: r.violations, passes: r.passes.length}), (e) => done({error: String(e)}))";
    let result = browser.script_later(body, vec![json!(RULES)])?;
    ensure!(result["error"].is_null(), "axe-core failed on {screen}: {}", result["error"]);
    let passes = result["passes"].as_u64().context("axe-core gave no result")?;
    ensure!(passes > 5, "axe-core found hardly anything to check on {screen}");
    let violations: Vec<String> =
        result["violations"].as_array().into_iter().flatten().map(described).collect();
    ensure!(violations.is_empty(), "accessibility of {screen}:\n{}", violations.join("\n"));
    Ok(())
}

fn described(violation: &Value) -> String {
    let nodes = violation["nodes"].as_array().into_iter().flatten();
    let nodes: Vec<_> =
        nodes.map(|node| format!("    {}\n      {}", node["html"], node["failureSummary"])).collect();
    format!("  {}: {}\n{}", violation["id"], violation["help"], nodes.join("\n"))
}

/// Fails unless whatever can be tapped is as big as a thumb needs: 44 pixels each way.
///
/// # Errors
/// What is too small, by the name of the screen.
pub fn ensure_thumbs(browser: &Browser, screen: &str) -> Result<()> {
    // A control within a label is as big as the label.
    let small = browser.script(
        "const size = (e) => (e.closest('label') || e).getBoundingClientRect(); \
         return [...document.querySelectorAll('button, a[href], input, select, summary, [role=button], [tabindex=\"0\"]')] \
           .filter((e) => e.checkVisibility({opacityProperty: true, visibilityProperty: true})) \
           .filter((e) => e.getBoundingClientRect().width > 0) \
           .filter((e) => size(e).width < 44 || size(e).height < 44) \
           .map((e) => e.outerHTML.slice(0, 120) + ' ' + size(e).width + ' x ' + size(e).height)",
    )?;
    ensure!(small.as_array().context("a list")?.is_empty(), "too small to tap on {screen}: {small:#}");
    Ok(())
}

/// Sizes of the window: a small phone's, and a wide one.
const SIZES: [(u32, u32); 2] = [(360, 640), (1280, 800)];
/// Lights.
const THEMES: [&str; 2] = ["light", "dark"];

/// Pictures the screen as it stands, in each size and theme, and checks it at its whole height: what is scrolled out of
/// view is checked too, and nothing is half under what stays in view.
///
/// # Errors
/// What the checker finds, and a screen that is wider than a small phone.
pub fn look(browser: &Browser, screen: &str) -> Result<()> {
    for (width, height) in SIZES {
        browser.resize(width, height)?;
        for theme in THEMES {
            browser.prefer(theme)?;
            let name = format!("{screen}-{theme}-{width}");
            browser.picture(&name)?;
            let tall = browser.script("return document.documentElement.scrollHeight")?;
            let tall = u32::try_from(tall.as_u64().context("a height")?)?;
            browser.resize(width, tall.max(height))?;
            check(browser, &name)?;
            browser.resize(width, height)?;
        }
    }
    browser.resize(360, 640)?;
    let wide = browser.script("return document.documentElement.scrollWidth - window.innerWidth")?;
    ensure!(wide.as_i64().context("a width")? <= 0, "{screen} is wider than a small phone by {wide}");
    Ok(())
}
