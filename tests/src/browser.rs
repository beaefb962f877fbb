//! A Chromium with a profile of its own.
//!
//! The methods wait for what they need (a part of the page to be there, a statement to become true) and give up
//! after [`PATIENCE`]; no test sleeps.

use std::future::Future;
use std::time::{Duration, Instant};

use anyhow::{Context, Result, bail};
use fantoccini::elements::Element;
use fantoccini::wd::WindowHandle;
use fantoccini::{Client, ClientBuilder, Locator};
use hyper_util::client::legacy::connect::HttpConnector;
use serde_json::{Value, json};
use tokio::runtime::Runtime;

use crate::devtools::{DevTools, Log};
use crate::driver::Driver;
use crate::folder::Folder;
use crate::surroundings;

/// How long anything may take: a first start of Chromium on a busy machine is the slowest.
pub const PATIENCE: Duration = Duration::from_secs(30);

/// Headless, and quiet: without the later ones Chromium calls hosts of its maker at every start, which would also
/// be in the way of the test that nothing but the page's own host is ever asked.
const FLAGS: [&str; 10] = [
    "--headless",
    "--no-sandbox",
    "--disable-gpu",
    "--disable-quic",
    "--no-first-run",
    "--disable-background-networking",
    "--disable-component-update",
    "--disable-sync",
    "--disable-dev-shm-usage",
    "--lang=en-GB",
];

/// Control, in WebDriver's alphabet of keys; pressed until it is said again.
const CONTROL: &str = "\u{e009}";

/// A browser window. It closes when dropped.
#[derive(Debug)]
pub struct Browser {
    client: Client,
    runtime: Runtime,
    // Ended in this order, after the window: the driver, then what it left on disk.
    _driver: Driver,
    _profile: Folder,
}

impl Browser {
    /// Starts Chromium, the size of a small phone.
    ///
    /// # Errors
    /// When the browser or its driver cannot be found or started.
    pub fn start() -> Result<Self> {
        Self::start_with(Vec::new())
    }

    /// The same, with whatever is not for this machine sent to a proxy.
    ///
    /// # Errors
    /// As [`Browser::start`].
    pub fn start_behind(proxy: &str) -> Result<Self> {
        Self::start_with(vec![format!("--proxy-server={}", proxy.trim_end_matches(surroundings::PREFIX))])
    }

    fn start_with(mut flags: Vec<String>) -> Result<Self> {
        let (chromium, driver) = surroundings::browser()?;
        let driver = Driver::start(&driver)?;
        let profile = Folder::new("profile")?;
        flags.extend(FLAGS.map(ToOwned::to_owned));
        flags.push(format!("--user-data-dir={}", profile.path().display()));
        let capabilities = json!({
            "goog:chromeOptions": {"binary": chromium, "args": flags},
            "goog:loggingPrefs": {"performance": "ALL", "browser": "ALL"},
            "timeouts": {"script": 30_000, "pageLoad": 30_000},
        });
        let capabilities = capabilities.as_object().cloned().unwrap_or_default();
        let runtime = tokio::runtime::Builder::new_current_thread().enable_all().build()?;
        let client = runtime
            .block_on(
                ClientBuilder::new(HttpConnector::new()).capabilities(capabilities).connect(&driver.url()),
            )
            .context("Chromium did not start")?;
        let browser = Self { client, runtime, _driver: driver, _profile: profile };
        browser.resize(360, 640)?;
        Ok(browser)
    }

    /// Waits for an answer of the driver; the longest that any command may take is twice our patience.
    fn wait_for<T>(&self, answer: impl Future<Output = T>) -> Result<T> {
        let limited = async { tokio::time::timeout(PATIENCE * 2, answer).await };
        self.runtime.block_on(limited).context("the driver does not answer")
    }

    /// Makes the screen this many CSS pixels wide and high, as a phone's below 600 pixels of width.
    ///
    /// # Errors
    /// When the browser is gone.
    pub fn resize(&self, width: u32, height: u32) -> Result<()> {
        let phone = width < 600;
        let size = json!({"width": width, "height": height, "deviceScaleFactor": 2, "mobile": phone});
        self.devtools("Emulation.setDeviceMetricsOverride", size)?;
        Ok(())
    }

    /// Opens an address.
    ///
    /// # Errors
    /// When nothing answers there.
    pub fn open(&self, url: &str) -> Result<()> {
        self.wait_for(self.client.goto(url))?.with_context(|| format!("{url} does not open"))
    }

    /// Loads the page again.
    ///
    /// # Errors
    /// When it does not load.
    pub fn reload(&self) -> Result<()> {
        self.wait_for(self.client.refresh())?.context("the page does not load again")
    }

    /// Opens another tab of the same profile and goes on there; gives the one that was left.
    ///
    /// # Errors
    /// When the browser opens none.
    pub fn open_tab(&self) -> Result<WindowHandle> {
        let left = self.tab()?;
        let opened = self.wait_for(self.client.new_window(true))??;
        self.turn_to(opened.handle)?;
        self.resize(360, 640)?;
        Ok(left)
    }

    /// The tab in front.
    ///
    /// # Errors
    /// When the browser is gone.
    pub fn tab(&self) -> Result<WindowHandle> {
        Ok(self.wait_for(self.client.window())??)
    }

    /// Goes on in another tab.
    ///
    /// # Errors
    /// When it is gone.
    pub fn turn_to(&self, tab: WindowHandle) -> Result<()> {
        self.wait_for(self.client.switch_to_window(tab))??;
        // A tab that lies behind another draws no frames.
        self.devtools("Page.bringToFront", json!({}))?;
        Ok(())
    }

    /// The address in the address bar.
    ///
    /// # Errors
    /// When the browser is gone.
    pub fn url(&self) -> Result<String> {
        Ok(self.wait_for(self.client.current_url())??.to_string())
    }

    fn element(&self, css: &str) -> Result<Element> {
        self.wait_for(self.client.wait().at_most(PATIENCE).for_element(Locator::Css(css)))?
            .with_context(|| format!("`{css}` does not appear{}", self.explained()))
    }

    /// What the page itself said, to make sense of a failure.
    fn explained(&self) -> String {
        let console = self.console().unwrap_or_default();
        if console.is_empty() { String::new() } else { format!("; the page said: {}", console.join(" | ")) }
    }

    /// Whether something can be seen at this moment.
    ///
    /// # Errors
    /// When the browser is gone.
    pub fn sees(&self, css: &str) -> Result<bool> {
        Ok(truthy(&self.script(&format!("return {}", visible(css)?))?))
    }

    /// Waits until something can be seen.
    ///
    /// # Errors
    /// When it does not show in time.
    pub fn see(&self, css: &str) -> Result<()> {
        let visible = format!("return {}", visible(css)?);
        self.until(&visible).with_context(|| format!("`{css}` is not to be seen"))
    }

    /// Waits until something cannot be seen, or is gone.
    ///
    /// # Errors
    /// When it stays.
    pub fn not_see(&self, css: &str) -> Result<()> {
        let hidden = format!("return !({})", visible(css)?);
        self.until(&hidden).with_context(|| format!("`{css}` stays in sight"))
    }

    /// The text of the first such element, as a person sees it.
    ///
    /// # Errors
    /// When there is none.
    pub fn text(&self, css: &str) -> Result<String> {
        let element = self.element(css)?;
        Ok(self.wait_for(element.text())??)
    }

    /// The text of the first such element, read past the page's own scripts, which may be forbidden.
    ///
    /// # Errors
    /// When there is none, or it cannot be seen.
    pub fn words(&self, css: &str) -> Result<String> {
        let expression = format!("{} && document.querySelector({}).innerText", visible(css)?, json!(css));
        let answer = self.devtools("Runtime.evaluate", json!({"expression": expression}))?;
        let text = answer["result"]["value"].as_str();
        text.map(ToOwned::to_owned).with_context(|| format!("`{css}` is not to be seen: {answer}"))
    }

    /// Lets the pages opened from now on run no scripts of their own, or run them again.
    ///
    /// # Errors
    /// When the browser is gone.
    pub fn forbid_scripts(&self, forbidden: bool) -> Result<()> {
        self.devtools("Emulation.setScriptExecutionDisabled", json!({"value": forbidden}))?;
        Ok(())
    }

    /// Whether the whole of the first such element lies within the window as it is scrolled now.
    ///
    /// # Errors
    /// When there is no such element.
    pub fn is_in_window(&self, css: &str) -> Result<bool> {
        let css = json!(css);
        let inside = self.script(&format!(
            "const r = document.querySelector({css}).getBoundingClientRect(); \
             return r.width > 0 && r.height > 0 && r.left >= 0 && r.top >= 0 \
                 && r.right <= window.innerWidth && r.bottom <= window.innerHeight"
        ))?;
        Ok(inside == true)
    }

    /// An attribute of the first such element.
    ///
    /// # Errors
    /// When there is no such element, or it does not have it.
    pub fn attribute(&self, css: &str, name: &str) -> Result<String> {
        let element = self.element(css)?;
        self.wait_for(element.attr(name))??.with_context(|| format!("`{css}` has no attribute `{name}`"))
    }

    /// What stands in an input.
    ///
    /// # Errors
    /// When there is none.
    pub fn value(&self, css: &str) -> Result<String> {
        let element = self.element(css)?;
        self.wait_for(element.prop("value"))??.with_context(|| format!("`{css}` holds no value"))
    }

    /// Taps it, scrolled out from under what stays in view (the page says how far, by its `scroll-padding`). Something
    /// that lies over it makes this fail, as it would stop a finger.
    ///
    /// # Errors
    /// When it is not there or cannot be tapped.
    pub fn tap(&self, css: &str) -> Result<()> {
        let element = self.element(css)?;
        self.script(&format!("document.querySelector({}).scrollIntoView({{block: 'nearest'}})", json!(css)))?;
        self.wait_for(element.click())?.with_context(|| format!("`{css}` cannot be tapped"))
    }

    /// Replaces what stands in an input by typing.
    ///
    /// # Errors
    /// When it is not there or takes no text.
    pub fn fill(&self, css: &str, text: &str) -> Result<()> {
        let element = self.element(css)?;
        // Select all and type over it; an empty text deletes it.
        let keys = format!("{CONTROL}a{CONTROL}{}", if text.is_empty() { "\u{e003}" } else { text });
        self.wait_for(element.send_keys(&keys))?.with_context(|| format!("`{css}` takes no text"))
    }

    /// Chooses in a list by the option's value.
    ///
    /// # Errors
    /// When the list or the option is not there.
    pub fn choose(&self, css: &str, value: &str) -> Result<()> {
        let element = self.element(css)?;
        self.wait_for(element.select_by_value(value))?
            .with_context(|| format!("`{css}` has no option `{value}`"))
    }

    /// Runs a function body in the page and gives what it returns.
    ///
    /// # Errors
    /// When it throws.
    pub fn script(&self, body: &str) -> Result<Value> {
        self.wait_for(self.client.execute(body, Vec::new()))?.with_context(|| format!("in the page: {body}"))
    }

    /// Runs a function body whose last argument is a function that takes the answer.
    ///
    /// # Errors
    /// When it throws, or never answers.
    pub fn script_later(&self, body: &str, arguments: Vec<Value>) -> Result<Value> {
        self.wait_for(self.client.execute_async(body, arguments))?
            .with_context(|| format!("in the page: {body}"))
    }

    /// Waits until a function body returns something true.
    ///
    /// # Errors
    /// When it does not in time.
    pub fn until(&self, body: &str) -> Result<()> {
        let start = Instant::now();
        loop {
            let last = self.script(body);
            if matches!(&last, Ok(value) if truthy(value)) {
                return Ok(());
            }
            if start.elapsed() > PATIENCE {
                bail!("waited in vain for `{body}`; last: {last:?}{}", self.explained());
            }
            std::thread::sleep(Duration::from_millis(20));
        }
    }

    /// Waits until a service worker answers for this page.
    ///
    /// # Errors
    /// When none takes over in time.
    pub fn until_offline_ready(&self) -> Result<()> {
        self.until(
            "return navigator.serviceWorker.controller !== null && navigator.serviceWorker.controller.state === 'activated'",
        )
        .context("no service worker has taken the page over")
    }

    /// A command of the Chrome DevTools protocol.
    ///
    /// # Errors
    /// When the browser does not know it or is gone.
    pub fn devtools(&self, command: &str, parameters: Value) -> Result<Value> {
        let sent = DevTools { command: command.to_owned(), parameters };
        self.wait_for(self.client.issue_cmd(sent))?.with_context(|| format!("DevTools refuses {command}"))
    }

    /// What the page asked for over the network, and anything it would have asked for, since this was last called.
    ///
    /// # Errors
    /// When the browser is gone.
    pub fn requests(&self) -> Result<Vec<String>> {
        let entries = self.wait_for(self.client.issue_cmd(Log("performance")))??;
        let asked = |entry: &Value| -> Option<String> {
            let event: Value = serde_json::from_str(entry["message"].as_str()?).ok()?;
            let event = &event["message"];
            (event["method"] == "Network.requestWillBeSent")
                .then(|| event["params"]["request"]["url"].as_str().map(ToOwned::to_owned))?
        };
        Ok(entries.as_array().into_iter().flatten().filter_map(asked).collect())
    }

    /// Warnings and errors of the page's console since this was last called.
    ///
    /// # Errors
    /// When the browser is gone.
    pub fn console(&self) -> Result<Vec<String>> {
        let entries = self.wait_for(self.client.issue_cmd(Log("browser")))??;
        let serious = |entry: &Value| entry["level"] == "SEVERE" || entry["level"] == "WARNING";
        let said = |entry: &Value| entry["message"].as_str().unwrap_or_default().to_owned();
        Ok(entries.as_array().into_iter().flatten().filter(|entry| serious(entry)).map(said).collect())
    }

    /// Light or dark, as the phone would say; waits until whatever fades has faded.
    ///
    /// # Errors
    /// When the browser is gone.
    pub fn prefer(&self, scheme: &str) -> Result<()> {
        let feature = json!({"features": [{"name": "prefers-color-scheme", "value": scheme}]});
        self.devtools("Emulation.setEmulatedMedia", feature)?;
        self.until(
            "return document.getAnimations().every((a) => a.playState !== 'running' \
                || a.effect.getComputedTiming().endTime === Infinity)",
        )
    }

    /// A picture of the window, as PNG.
    ///
    /// # Errors
    /// When it cannot be taken.
    pub fn screenshot(&self) -> Result<Vec<u8>> {
        Ok(self.wait_for(self.client.screenshot())??)
    }

    /// Gives an input for files the path of one, as if it had been chosen.
    ///
    /// # Errors
    /// When there is no such input.
    pub fn choose_file(&self, css: &str, path: &std::path::Path) -> Result<()> {
        let element = self.element(css)?;
        self.wait_for(element.send_keys(&path.display().to_string()))?
            .with_context(|| format!("`{css}` takes no file"))
    }

    /// Takes a picture, when `LAMPLADDER_SHOTS` names a folder for them.
    ///
    /// # Errors
    /// When there is such a folder, but the picture cannot be taken or written.
    pub fn picture(&self, name: &str) -> Result<()> {
        let Some(folder) = surroundings::pictures() else { return Ok(()) };
        std::fs::create_dir_all(&folder)?;
        Ok(std::fs::write(folder.join(format!("{name}.png")), self.screenshot()?)?)
    }
}

impl Drop for Browser {
    fn drop(&mut self) {
        // The driver would end an unfinished session only when it is itself ended, and leave Chromium behind.
        let client = self.client.clone();
        let _ = self.wait_for(client.close());
    }
}

/// A JavaScript expression: is the first such element there and in view?
fn visible(css: &str) -> Result<String> {
    let css = serde_json::to_string(css)?;
    Ok(format!(
        "((e) => e !== null && e.checkVisibility({{opacityProperty: true, visibilityProperty: true}}) \
         && e.getBoundingClientRect().height > 0)(document.querySelector({css}))"
    ))
}

fn truthy(value: &Value) -> bool {
    match value {
        Value::Null => false,
        Value::Bool(is) => *is,
        Value::Number(number) => number.as_f64() != Some(0.0),
        Value::String(text) => !text.is_empty(),
        Value::Array(_) | Value::Object(_) => true,
    }
}
