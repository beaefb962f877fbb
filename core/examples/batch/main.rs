//! JSON lines in, JSON lines out: the core of the page for scripts, spreadsheets and other tools.
//!
//! `cargo run --release -q -p lampladder-core --example batch < requests.jsonl > answers.jsonl`
//!
//! One request a line, one answer a line, in order; blank lines are passed over. A line that is wrong answers
//! with `error`, the path of the field that is wrong and why; the next line is served all the same. Quantities are
//! SI; volts and amperes RMS, or DC.

mod ask_diagnose;
mod ask_fuse;
mod ask_glow;
mod ask_ladder;
mod ask_lamp;
mod ask_readings;
mod ask_steady;
mod ask_switch_on;
mod fields;
mod parts;

use std::io::{self, BufRead, Write};

use serde::Serialize;
use serde_json::Value;

use crate::fields::{Fields, Refusal};

fn main() -> io::Result<()> {
    match serve(io::stdin().lock(), io::stdout().lock()) {
        // Whoever read the answers has had enough of them.
        Err(error) if error.kind() == io::ErrorKind::BrokenPipe => Ok(()),
        other => other,
    }
}

fn serve(mut requests: impl BufRead, mut answers: impl Write) -> io::Result<()> {
    let mut line = Vec::new();
    // Bytes, not text: a line that is no UTF-8 is one wrong line, not the end.
    while requests.read_until(b'\n', &mut line)? > 0 {
        if !line.trim_ascii().is_empty() {
            answers.write_all(answer(&line).as_bytes())?;
            answers.write_all(b"\n")?;
        }
        line.clear();
    }
    answers.flush()
}

/// The answer to one line, whatever is in it.
fn answer(line: &[u8]) -> String {
    let request: Value = match serde_json::from_slice(line) {
        Ok(request) => request,
        Err(error) => {
            return written(
                &Value::Null,
                &Failure { error: Refusal::whole_line(format!("no JSON: {error}")) },
            );
        }
    };
    let id = request.get("id").unwrap_or(&Value::Null);
    served(id, &request).unwrap_or_else(|error| written(id, &Failure { error }))
}

fn served(id: &Value, request: &Value) -> Result<String, Refusal> {
    let Value::Object(map) = request else {
        return Err(Refusal::whole_line("a request is a JSON object"));
    };
    let mut fields = Fields::new(map, String::new());
    fields.maybe("id");
    let ask = fields.need("ask")?;
    match ask.text()? {
        "lamp" => Ok(written(id, &ask_lamp::answer(fields)?)),
        "ladder" => Ok(written(id, &ask_ladder::answer(fields)?)),
        "steady" => Ok(written(id, &ask_steady::answer(fields)?)),
        "glow" => Ok(written(id, &ask_glow::answer(fields)?)),
        "readings" => Ok(written(id, &ask_readings::answer(fields)?)),
        "diagnose" => Ok(written(id, &ask_diagnose::answer(fields)?)),
        "switch-on" => Ok(written(id, &ask_switch_on::answer(fields)?)),
        "fuse" => Ok(written(id, &ask_fuse::answer(fields)?)),
        _ => {
            Err(ask
                .refuse("ask must be one of lamp, steady, switch-on, readings, diagnose, ladder, glow, fuse"))
        }
    }
}

#[derive(Serialize)]
struct Failure {
    error: Refusal,
}

#[derive(Serialize)]
struct Answer<'a, T> {
    id: &'a Value,
    #[serde(flatten)]
    body: &'a T,
}

fn written<T: Serialize>(id: &Value, body: &T) -> String {
    // Plain structs with text keys cannot fail to serialise; a number that is not finite would be written as null.
    serde_json::to_string(&Answer { id, body }).unwrap_or_else(|_| String::from("{}"))
}
