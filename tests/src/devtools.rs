//! Two commands that ChromeDriver has beyond the WebDriver standard.

use fantoccini::wd::WebDriverCompatibleCommand;
use serde_json::{Value, json};

/// A command of the Chrome DevTools protocol.
#[derive(Debug)]
pub(crate) struct DevTools {
    pub(crate) command: String,
    pub(crate) parameters: Value,
}

/// The entries of one of the browser's logs since they were last asked for.
#[derive(Debug)]
pub(crate) struct Log(pub(crate) &'static str);

type Address = Result<url::Url, url::ParseError>;

fn in_session(base: &url::Url, session: Option<&str>, command: &str) -> Address {
    base.join(&format!("session/{}/{command}", session.unwrap_or_default()))
}

impl WebDriverCompatibleCommand for DevTools {
    fn endpoint(&self, base: &url::Url, session: Option<&str>) -> Address {
        in_session(base, session, "goog/cdp/execute")
    }

    fn method_and_body(&self, _: &url::Url) -> (http::Method, Option<String>) {
        (http::Method::POST, Some(json!({"cmd": self.command, "params": self.parameters}).to_string()))
    }
}

impl WebDriverCompatibleCommand for Log {
    fn endpoint(&self, base: &url::Url, session: Option<&str>) -> Address {
        in_session(base, session, "se/log")
    }

    fn method_and_body(&self, _: &url::Url) -> (http::Method, Option<String>) {
        (http::Method::POST, Some(json!({"type": self.0}).to_string()))
    }
}
