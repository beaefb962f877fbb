//! The batch example, driven as a process the way a script would: good lines, bad lines, and that nothing stops it.

use std::io::Write;
use std::process::{Command, Stdio};

use lampladder_core::bank::Bank;
use lampladder_core::lamp::Lamp;
use lampladder_core::load::{Impedance, Load};
use lampladder_core::steady;
use lampladder_core::supply::Supply;
use serde_json::{Value, json};

/// The answers to some lines of input.
fn answers(input: &[u8]) -> Vec<Value> {
    let mut command = Command::new(env!("CARGO"));
    command.current_dir(concat!(env!("CARGO_MANIFEST_DIR"), "/.."));
    command.args(["run", "--quiet", "--package", "lampladder-core", "--example", "batch"]);
    command.stdin(Stdio::piped()).stdout(Stdio::piped());
    let mut child = command.spawn().expect("cargo runs");
    let mut stdin = child.stdin.take().expect("piped");
    let input = input.to_vec();
    // On its own thread: a long input and a long output would wait for each other.
    let writer = std::thread::spawn(move || stdin.write_all(&input));
    let output = child.wait_with_output().expect("it ends with its input");
    writer.join().expect("no panic").expect("it reads to the end");
    assert!(output.status.success(), "{:?}", output.status);
    let text = String::from_utf8(output.stdout).expect("UTF-8");
    assert!(!text.contains("NaN") && !text.contains("inf"), "{text}");
    text.lines().map(|line| serde_json::from_str(line).expect("every answer is JSON")).collect()
}

fn answers_to(requests: &[Value]) -> Vec<Value> {
    let lines: Vec<String> = requests.iter().map(Value::to_string).collect();
    let found = answers(lines.join("\n").as_bytes());
    assert_eq!(found.len(), requests.len(), "one answer a line");
    found
}

#[track_caller]
fn near(answer: &Value, path: &str, expected: f64) {
    let found = answer.pointer(path).and_then(Value::as_f64).unwrap_or(f64::NAN);
    assert!((found - expected).abs() <= 1e-12 * expected.abs(), "{path}: {found} {expected} in {answer}");
}

fn keys(value: &Value) -> Vec<&str> {
    value.as_object().expect("an object").keys().map(String::as_str).collect()
}

#[test]
fn good_lines_answer_with_the_cores_own_numbers() {
    let lamp = json!({"volts": 230, "watts": 60, "fill": "gas"});
    let mains = json!({"volts": 230, "hertz": 50});
    let found = answers_to(&[
        json!({"id": 1, "ask": "lamp", "lamp": lamp, "at_volts": [20, 230], "at_kelvin": [1500]}),
        json!({"id": "two", "ask": "steady", "supply": mains, "bank": [[lamp], [{"volts": 230, "watts": 100}]],
               "load": {"kind": "impedance", "ohms": 300, "reactance_ohms": 200}}),
        json!({"id": {"three": [3]}, "ask": "glow", "kelvin": 2000}),
        json!({"ask": "steady", "supply": mains, "bank": [[lamp]],
               "load": {"kind": "rectifier", "farads": 1e-4, "series_ohms": 1, "diode_volts": 1.4, "draw": {"ohms": 1300}}}),
    ]);
    let core = Lamp::new(230.0, 60.0).expect("a stock size");
    assert_eq!(found[0]["id"], 1);
    assert_eq!(
        keys(&found[0]),
        [
            "cold_ohms",
            "gas_share",
            "id",
            "rated_kelvin",
            "rated_lumens",
            "states",
            "wire_diameter_metres",
            "wire_metres"
        ]
    );
    near(&found[0], "/rated_kelvin", core.rated_kelvin());
    near(&found[0], "/cold_ohms", core.cold_ohms());
    near(&found[0], "/states/0/amps", core.at_volts(20.0).amps);
    near(&found[0], "/states/1/volts", 230.0);
    near(&found[0], "/states/2/kelvin", 1500.0);
    assert_eq!(
        keys(&found[0]["states"][0]),
        ["amps", "amps_high", "amps_low", "kelvin", "lumens", "volts", "watts"]
    );

    assert_eq!(found[1]["id"], "two");
    let bank =
        Bank::new(vec![vec![core], vec![Lamp::new(230.0, 100.0).expect("a stock size")]]).expect("two");
    let load = Load::Impedance(Impedance::new(300.0, 200.0).expect("in range"));
    let solved =
        steady::solve(&Supply::new(230.0, 50.0, 0.0).expect("a mains"), &bank, &load).expect("solvable");
    assert_eq!(found[1]["outcome"], "settles");
    near(&found[1], "/equilibria/0/amps", solved.equilibria[0].amps);
    near(&found[1], "/equilibria/0/lamps/1/0/kelvin", solved.equilibria[0].lamps[1][0].kelvin);
    assert!(found[1]["equilibria"][0].get("load_dc_volts").is_none(), "no reservoir, no DC volts");

    assert_eq!(found[2]["id"], json!({"three": [3]}));
    assert_eq!(keys(&found[2]), ["id", "relative_luminance", "srgb", "word", "x", "y"]);
    assert_eq!(found[3]["id"], Value::Null, "no id given, null given back");
    assert!(found[3]["equilibria"][0]["load_dc_volts"].as_f64().expect("a reservoir") > 150.0);
}

#[test]
fn every_kind_of_load_is_served() {
    let draws = [
        json!({"ohms": 1300}),
        json!({"amps": 0.1}),
        json!({"watts": 15, "start_volts": 100, "stop_volts": 70}),
    ];
    let mut loads = vec![
        json!({"kind": "short"}),
        json!({"kind": "open"}),
        json!({"kind": "resistor", "ohms": 529}),
        json!({"kind": "impedance", "ohms": 300, "reactance_ohms": -200}),
        json!({"kind": "lamp", "lamp": {"volts": 230, "watts": 25}}),
    ];
    loads.extend(draws.map(|draw| {
        json!({"kind": "rectifier", "farads": 1e-4, "series_ohms": 1, "diode_volts": 1.4, "draw": draw})
    }));
    for family in lampladder_core::family::Family::ALL {
        for condition in family.conditions() {
            loads.push(json!({"kind": "plate", "family": family.name(), "volts": 230, "watts": 60,
                              "condition": condition.name()}));
        }
        loads.push(json!({"kind": "plate", "family": family.name(), "volts": 230, "watts": 60}));
    }
    let request = |load: &Value| {
        json!({"id": load, "ask": "steady", "supply": {"volts": 230, "hertz": 50, "ohms": 0.5},
               "bank": [[{"volts": 230, "watts": 100}]], "load": load})
    };
    let requests: Vec<Value> = loads.iter().map(request).collect();
    for answer in answers_to(&requests) {
        let outcome = answer["outcome"].as_str().unwrap_or_else(|| panic!("{answer}"));
        match outcome {
            "hunts" => assert!(answer["period_seconds"].as_f64().expect("a period") > 0.0, "{answer}"),
            "settles" | "does-not-start" => assert!(answer.get("period_seconds").is_none(), "{answer}"),
            _ => panic!("{answer}"),
        }
        assert_all_finite(&answer["equilibria"]);
    }
}

fn assert_all_finite(value: &Value) {
    match value {
        Value::Array(items) => items.iter().for_each(assert_all_finite),
        Value::Object(fields) => fields.values().for_each(assert_all_finite),
        // A number that is not finite would have been written as null.
        Value::Null => panic!("null for a number"),
        _ => {}
    }
}

/// A request, the field that its answer must name, and a part of what it must say.
type Bad = (Value, &'static str, &'static str);

fn bad_lamps() -> Vec<Bad> {
    let lamp = |change: Value| {
        let mut lamp = json!({"volts": 230, "watts": 60});
        lamp.as_object_mut().expect("one").extend(change.as_object().expect("one").clone());
        json!({"id": 7, "ask": "lamp", "lamp": lamp})
    };
    let good = json!({"volts": 230, "watts": 60});
    vec![
        (lamp(json!({"watts": 0})), "lamp.watts", "not 0"),
        (lamp(json!({"watts": -60})), "lamp.watts", "not -60"),
        (lamp(json!({"watts": 1e300})), "lamp.watts", "5000"),
        (lamp(json!({"volts": 0})), "lamp.volts", "not 0"),
        (lamp(json!({"watts": "60"})), "lamp.watts", "must be a number, not a text"),
        (lamp(json!({"watts": ""})), "lamp.watts", "must be a number"),
        (lamp(json!({"watts": "NaN"})), "lamp.watts", "must be a number"),
        (lamp(json!({"watts": null})), "lamp.watts", "missing"),
        (lamp(json!({"watts": [60]})), "lamp.watts", "not a list"),
        (lamp(json!({"fill": "LED"})), "lamp.fill", "does not limit"),
        (lamp(json!({"fill": "compact fluorescent"})), "lamp.fill", "does not limit"),
        (lamp(json!({"fill": "carbon"})), "lamp.fill", "loses resistance"),
        (lamp(json!({"fill": "neon"})), "lamp.fill", "vacuum, gas, halogen"),
        (lamp(json!({"wats": 60})), "lamp.wats", "unknown"),
        (lamp(json!({"gas_share": 0.6})), "lamp.gas_share", "0.5"),
        (lamp(json!({"rated_kelvin": 300})), "lamp.rated_kelvin", "1500"),
        (lamp(json!({"cold_ohms": 1e9})), "lamp.cold_ohms", "not"),
        (
            lamp(json!({"points": [{"volts": 40, "amps": 0.12}, {"volts": 50, "amps": 70}]})),
            "lamp.points[1].amps",
            "not 70",
        ),
        (lamp(json!({"points": [{"volts": 40}]})), "lamp.points[0].amps", "missing"),
        (lamp(json!({"points": [{"volts": 40, "amps": 0.12, "ohms": 1}]})), "lamp.points[0].ohms", "unknown"),
        (json!({"id": 7, "ask": "lamp"}), "lamp", "missing"),
        (json!({"id": 7, "ask": "lamp", "lamp": good, "at_volts": [20, -1]}), "at_volts[1]", "not -1"),
        (json!({"id": 7, "ask": "lamp", "lamp": good, "at_volts": [1e300]}), "at_volts[0]", "burn out"),
        (json!({"id": 7, "ask": "lamp", "lamp": good, "at_volts": 20}), "at_volts", "must be a list"),
        (json!({"id": 7, "ask": "lamp", "lamp": good, "at_kelvin": [1500, 4000]}), "at_kelvin[1]", "3600"),
        (json!({"id": 7, "ask": "lamp", "lamp": good, "at_amps": [1]}), "at_amps", "unknown"),
        (json!({"id": 7, "ask": "glow", "kelvin": 0}), "kelvin", "300"),
        (json!({"id": 7, "ask": "glow", "kelvin": "hot"}), "kelvin", "must be a number"),
        (json!({"id": 7, "ask": "future"}), "ask", "one of"),
        (json!({"id": 7, "ask": 3}), "ask", "must be a text"),
        (json!({"id": 7}), "ask", "missing"),
    ]
}

fn bad_circuits() -> Vec<Bad> {
    let steady = |bank: Value, load: Value| json!({"id": 7, "ask": "steady", "supply": {"volts": 230, "hertz": 50}, "bank": bank, "load": load});
    let good = json!({"volts": 230, "watts": 60});
    let short = json!({"kind": "short"});
    let fed = |supply: Value| json!({"id": 7, "ask": "steady", "supply": supply, "bank": [[{"volts": 230, "watts": 60}]], "load": {"kind": "short"}});
    let rectifier = |change: Value| {
        let mut load = json!({"kind": "rectifier", "farads": 1e-4, "series_ohms": 1, "diode_volts": 1.4, "draw": {"ohms": 100}});
        load.as_object_mut().expect("one").extend(change.as_object().expect("one").clone());
        json!({"id": 7, "ask": "steady", "supply": {"volts": 230, "hertz": 50}, "bank": [[good]], "load": load})
    };
    vec![
        (fed(json!({"volts": 0, "hertz": 50})), "supply.volts", "not 0"),
        (fed(json!({"volts": 230, "hertz": 5})), "supply.hertz", "not 5"),
        (fed(json!({"volts": 230, "hertz": 50, "ohms": -1})), "supply.ohms", "not -1"),
        (fed(json!({"volts": 230})), "supply.hertz", "missing"),
        (fed(json!({"volts": 230, "hertz": 50, "phase": 3})), "supply.phase", "unknown"),
        (fed(json!(230)), "supply", "must be an object"),
        (steady(json!([]), short.clone()), "bank", ""),
        (steady(json!([[good], []]), short.clone()), "bank[1]", "at least one"),
        (steady(json!([good]), short.clone()), "bank[0]", "must be a list"),
        (steady(json!([[good, {"volts": 230, "watts": 0}]]), short.clone()), "bank[0][1].watts", "not 0"),
        (steady(json!([vec![&good; 9]]), short.clone()), "bank", "8"),
        (steady(json!([[{"volts": 12, "watts": 21}]]), short.clone()), "bank[0][0].volts", "burn out"),
        (steady(json!([[good]]), json!({"kind": "led"})), "load.kind", "one of"),
        (steady(json!([[good]]), json!({"kind": "short", "ohms": 1})), "load.ohms", "unknown"),
        (steady(json!([[good]]), json!({"kind": "resistor"})), "load.ohms", "missing"),
        (steady(json!([[good]]), json!({"kind": "resistor", "ohms": -5})), "load.ohms", "not -5"),
        (
            steady(
                json!([[good]]),
                json!({"kind": "lamp", "lamp": {"volts": 230, "watts": 60, "fill": "led"}}),
            ),
            "load.lamp.fill",
            "limit",
        ),
        (
            steady(json!([[good]]), json!({"kind": "plate", "family": "toaster", "volts": 230, "watts": 45})),
            "load.family",
            "heater",
        ),
        (
            steady(
                json!([[good]]),
                json!({"kind": "plate", "family": "heater", "volts": 230, "watts": 45, "condition": "haunted"}),
            ),
            "load.condition",
            "healthy",
        ),
        (
            steady(
                json!([[good]]),
                json!({"kind": "plate", "family": "heater", "volts": 230, "watts": 45, "power_factor": 1.5}),
            ),
            "load.power_factor",
            "not 1.5",
        ),
        (rectifier(json!({"draw": {}})), "load.draw", "exactly one"),
        (rectifier(json!({"draw": {"ohms": 100, "amps": 1}})), "load.draw", "exactly one"),
        (rectifier(json!({"draw": {"ohms": 0}})), "load.draw.ohms", "not 0"),
        (rectifier(json!({"draw": {"watts": 5}})), "load.draw.start_volts", "missing"),
        (
            rectifier(json!({"draw": {"watts": 5, "start_volts": 70, "stop_volts": 100}})),
            "load.draw.stop_volts",
            "start_volts",
        ),
        (rectifier(json!({"draw": {"ohms": 100, "start_volts": 70}})), "load.draw.start_volts", "unknown"),
        (rectifier(json!({"farads": 0})), "load.farads", "not 0"),
        (rectifier(json!({"diode_volts": 100})), "load.diode_volts", "not 100"),
        (
            json!({"id": 7, "ask": "steady", "supply": {"volts": 230, "hertz": 0}, "bank": [[good]],
                   "load": {"kind": "impedance", "ohms": 1, "reactance_ohms": 1}}),
            "load.reactance_ohms",
            "direct current",
        ),
    ]
}

#[test]
fn a_bad_line_names_its_field_and_the_next_is_served() {
    let good = json!({"id": "good", "ask": "glow", "kelvin": 1500});
    let bad = [bad_lamps(), bad_circuits()].concat();
    // A good line after every bad one.
    let requests: Vec<Value> = bad.iter().flat_map(|(request, ..)| [request.clone(), good.clone()]).collect();
    let found = answers_to(&requests);
    for (pair, (request, field, message)) in found.chunks(2).zip(&bad) {
        assert_eq!(pair[0]["error"]["field"], *field, "{request}\n{}", pair[0]);
        let said = pair[0]["error"]["message"].as_str().expect("a message");
        assert!(said.contains(message), "{request}: {said}");
        assert_eq!(pair[0]["id"], 7, "the id comes back");
        assert_eq!(keys(&pair[0]), ["error", "id"]);
        assert_eq!(pair[1]["word"], "orange", "{}", pair[1]);
    }
}

#[test]
fn lines_that_are_no_requests_are_answered_and_blank_ones_passed_over() {
    let mut input: Vec<u8> = Vec::new();
    let broken: [&[u8]; 12] = [
        b"{",
        b"lamp",
        b"{\"id\":1,\"ask\":\"glow\",\"kelvin\":NaN}",
        b"{\"id\":1,\"ask\":\"glow\",\"kelvin\":Infinity}",
        b"{\"id\":1,\"ask\":\"glow\",\"kelvin\":1e999}",
        b"{\"id\":1,\"ask\":\"glow\",\"kelvin\":2000} {}",
        b"[]",
        b"null",
        b"230",
        b"\"ask\"",
        b"\xff\xfe{}",
        b"{\"id\":\"\xff\"}",
    ];
    for line in broken {
        input.extend_from_slice(line);
        input.extend_from_slice(b"\n\n  \t\r\n");
    }
    // Nested deeper than any request; longer than any request; the last line without its end.
    input.extend_from_slice("[".repeat(100_000).as_bytes());
    input.push(b'\n');
    input.extend_from_slice(format!("{{\"id\":\"{}\"}}\n", "x".repeat(1_000_000)).as_bytes());
    input.extend_from_slice(b"{\"id\":2,\"ask\":\"glow\",\"kelvin\":1500}");
    let found = answers(&input);
    assert_eq!(found.len(), broken.len() + 3, "blank lines have no answer");
    for answer in &found[..=broken.len()] {
        assert!(answer["error"]["message"].is_string(), "{answer}");
        assert_eq!((&answer["error"]["field"], &answer["id"]), (&Value::Null, &Value::Null));
    }
    assert_eq!(found[broken.len() + 1]["error"]["field"], "ask");
    assert_eq!(found[broken.len() + 2]["word"], "orange");
}

#[test]
fn no_input_is_no_output() {
    assert!(answers(b"").is_empty());
    assert!(answers(b"\n\n").is_empty());
}
