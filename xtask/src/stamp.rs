//! What Trunk's output still needs: no inline script, one style sheet, names that change with the contents, and a
//! service worker that knows its files.

use std::fs;
use std::path::Path;

use anyhow::{Context, Result, bail};

use crate::{files, pack, split};

/// Texts of the project that go into the page.
#[derive(Debug)]
pub struct Sources {
    worker: String,
    rest: String,
    marks: String,
}

impl Sources {
    /// As they stand in the project that lies in `root`.
    ///
    /// # Errors
    /// When one cannot be read.
    pub fn of(root: &Path) -> Result<Self> {
        let read = |name: &str| {
            fs::read_to_string(root.join(name)).with_context(|| format!("{name} cannot be read"))
        };
        Ok(Self {
            worker: read("static/sw.js")?,
            rest: read("static/rest.js")?,
            marks: read("web/rest.txt")?,
        })
    }
}

/// Finishes the page in `folder`; `light` is for the release, whose program is cut in two, and whose programs and styles
/// are packed. Gives the number of files that the worker will keep.
///
/// # Errors
/// When the page or the worker is not as expected, or cannot be read or written.
pub fn finish(folder: &Path, sources: &Sources, light: bool) -> Result<usize> {
    let index = folder.join("index.html");
    let mut html =
        fs::read_to_string(&index).with_context(|| format!("{} cannot be read", index.display()))?;
    if light {
        let (page, style) = join_styles(folder, &html)?;
        html = pack_page(folder, &page, &style, sources)?;
        pack_pair(&folder.join("reckoner_bg.wasm"), &folder.join("reckoner.js"))?;
    }
    let (html, scripts) = externalise(&html)?;
    let html = rename_reckoner(folder, html)?;
    for script in &scripts {
        fs::write(folder.join(&script.name), &script.text)?;
    }
    fs::write(&index, if light { without_remarks(&html) } else { html })?;
    let mut contents = Vec::new();
    for (name, path) in files::below(folder)? {
        // The worker itself is looked after by the browser, not by its own cache.
        if name != "sw.js" {
            contents.push((name, fs::read(path)?));
        }
    }
    fs::write(folder.join("sw.js"), worker(&sources.worker, &contents)?)?;
    Ok(contents.len())
}

/// A page without its remarks, which are for the reader of static/index.html.
fn without_remarks(html: &str) -> String {
    let mut out = String::new();
    let mut rest = html;
    while let Some((before, after)) = rest.split_once("<!--") {
        out.push_str(before.trim_end_matches(' '));
        rest = after.split_once("-->").map_or("", |(_, after)| after.trim_start_matches('\n'));
    }
    out + rest
}

/// A script taken out of the page.
#[derive(Debug, PartialEq, Eq)]
struct Script {
    name: String,
    text: String,
}

/// Moves every inline script into a file named by its contents, so that the page runs under a content security
/// policy that allows scripts from the page's own host only. Trunk starts the program by such a script.
fn externalise(html: &str) -> Result<(String, Vec<Script>)> {
    let mut out = String::new();
    let mut scripts = Vec::new();
    let mut rest = html;
    while let Some(start) = rest.find("<script") {
        let (before, tag) = rest.split_at(start);
        let open = tag.find('>').context("index.html ends inside a script tag")?;
        let end = tag.find("</script>").context("index.html has a script that does not end")?;
        let attributes = tag[..open].trim_start_matches("<script").trim();
        out.push_str(before);
        let inline = !attributes.split_whitespace().any(|attribute| attribute.starts_with("src="));
        // Data in a script tag is not run, and no policy forbids it.
        if inline && !attributes.contains("json") {
            let text = pack::unindented(&tag[open + 1..end]);
            let name = format!("start-{:016x}.js", hash(text.as_bytes()));
            let space = if attributes.is_empty() { "" } else { " " };
            out.extend(["<script", space, attributes, " src=\"./", &name, "\"></script>"]);
            scripts.push(Script { name, text });
        } else {
            out.push_str(&tag[..end + "</script>".len()]);
        }
        rest = &tag[end + "</script>".len()..];
    }
    out.push_str(rest);
    Ok((out, scripts))
}

/// Makes two style sheets of all, in their order: each is a request of its own, and they pack better together. Gives the
/// page with the first, and the name of the other, of those that are marked `data-rest`: it comes with the rest of the
/// program.
fn join_styles(folder: &Path, html: &str) -> Result<(String, String)> {
    let mut out = String::new();
    let (mut first, mut later) = (String::new(), String::new());
    let mut place = None;
    let mut rest = html;
    while let Some(start) = rest.find("<link rel=\"stylesheet\"") {
        let length = rest[start..].find('>').context("index.html ends inside a link")? + 1;
        out.push_str(rest[..start].trim_end());
        let link = &rest[start..start + length];
        let name = link
            .split_once("href=\"./")
            .and_then(|(_, after)| after.split('"').next())
            .context("a style sheet without an address")?;
        place.get_or_insert(out.len());
        let file = folder.join(name);
        let style = if link.contains("data-rest") { &mut later } else { &mut first };
        style.push_str(
            &fs::read_to_string(&file).with_context(|| format!("{} cannot be read", file.display()))?,
        );
        fs::remove_file(file)?;
        rest = &rest[start + length..];
    }
    out.push_str(rest);
    let write = |stem: &str, style: &str| -> Result<String> {
        let style = squeezed(style);
        let name = format!("{stem}-{:016x}.css", hash(style.as_bytes()));
        fs::write(folder.join(&name), style)?;
        Ok(name)
    };
    let Some(place) = place else { return Ok((out, String::new())) };
    let name = write("style", &first)?;
    out.insert_str(place, &format!("\n  <link rel=\"stylesheet\" href=\"./{name}\">"));
    Ok((out, write("rest", &later)?))
}

/// A style sheet without its comments and most of its spaces. Ours have neither of these characters inside quotes.
fn squeezed(style: &str) -> String {
    let mut plain = String::new();
    let mut rest = style;
    while let Some((before, after)) = rest.split_once("/*") {
        plain.push_str(before);
        rest = after.split_once("*/").map_or("", |(_, after)| after);
    }
    plain.push_str(rest);
    let mut out = String::new();
    for word in plain.split_whitespace() {
        // A space before a colon tells a descendant from a state; no other of these signs needs one.
        if !(out.is_empty()
            || out.ends_with(['{', '}', ';', ',', ':'])
            || word.starts_with(['{', '}', ';', ',']))
        {
            out.push(' ');
        }
        out.push_str(word);
    }
    out.replace(";}", "}")
}

/// The program and the script that loads it, cut, packed, and named anew by what they are now.
fn pack_page(folder: &Path, html: &str, style: &str, sources: &Sources) -> Result<String> {
    let Some((_, start)) = html.split_once("module_or_path: './") else { return Ok(html.to_owned()) };
    let wasm = start.split('\'').next().unwrap_or_default();
    let script = wasm.replace("_bg.wasm", ".js");
    let script_of_rest = sources.rest.replace("rest.css", style);
    cut(folder, wasm, &script, &script_of_rest, &sources.marks)?;
    pack_pair(&folder.join(wasm), &folder.join(&script))?;
    let stem = script.rsplit_once('-').map_or("page", |(stem, _)| stem);
    let mut renamed = Vec::new();
    for old in [wasm, &script] {
        let file = folder.join(old);
        let tail = if old == wasm { "_bg.wasm" } else { ".js" };
        let new = format!("{stem}-{:016x}{tail}", hash(&fs::read(&file)?));
        fs::rename(file, folder.join(&new))?;
        renamed.push((old, new));
    }
    Ok(with_names(html, &renamed))
}

/// What wasm-bindgen writes at the head of a program's imports.
const IMPORTS: &str = "const import0 = {";

/// Cuts the program in two, and lets the script fetch the second part.
fn cut(folder: &Path, wasm: &str, script: &str, script_of_rest: &str, marks: &str) -> Result<()> {
    let (wasm, script) = (folder.join(wasm), folder.join(script));
    let Some(parts) = split::split(&fs::read(&wasm)?, &split::Marks::of(marks))? else {
        bail!("nothing in {} bears a mark of web/rest.txt: has it no names?", wasm.display());
    };
    let rest = pack::pack_alone(&parts.rest)?;
    let name = format!("rest-{:016x}.wasm", hash(&rest));
    let text = fs::read_to_string(&script)?;
    if text.matches(IMPORTS).count() != 1 {
        bail!("{} does not look like wasm-bindgen's", script.display());
    }
    let text = text.replace(IMPORTS, &format!("{IMPORTS}\n{}: () => waitForRest(),", split::WAIT));
    fs::write(wasm, parts.first)?;
    fs::write(folder.join(&name), rest)?;
    fs::write(script, text + &script_of_rest.replace("rest.wasm", &name))?;
    Ok(())
}

/// Packs a program and its script where they stand, if they are there.
fn pack_pair(wasm: &Path, script: &Path) -> Result<()> {
    if !wasm.exists() {
        return Ok(());
    }
    let (packed, text) = pack::pack(&fs::read(wasm)?, &fs::read_to_string(script)?)
        .with_context(|| format!("{} cannot be packed", wasm.display()))?;
    fs::write(wasm, packed)?;
    fs::write(script, text)?;
    Ok(())
}

/// The reckoner's files, each after those that it names.
const RECKONER: [&str; 3] = ["reckoner_bg.wasm", "reckoner.js", "reckoner_loader.js"];

/// Trunk's loader calls wasm-bindgen in a way that is answered by a warning on every visitor's console; this is the way
/// that is not.
fn with_call(loader: &str) -> String {
    loader.replace("wasm_bindgen(\"", "wasm_bindgen({module_or_path:\"").replace(".wasm\")", ".wasm\"})")
}

/// Trunk names a worker's files without a hash. They get one here, or a page could meet the reckoner of an older build
/// in the browser's own cache.
fn rename_reckoner(folder: &Path, html: String) -> Result<String> {
    let mut renamed: Vec<(&str, String)> = Vec::new();
    if !html.contains(RECKONER[2]) {
        // A page that asks for no reckoner has none.
        return Ok(html);
    }
    for name in RECKONER {
        let file = folder.join(name);
        let mut bytes = fs::read(&file).with_context(|| format!("{} cannot be read", file.display()))?;
        if let Ok(text) = core::str::from_utf8(&bytes) {
            let text = with_names(text, &renamed);
            bytes = if name == RECKONER[2] { with_call(&text) } else { text }.into_bytes();
        }
        let new = name.replacen("reckoner", &format!("reckoner-{:016x}", hash(&bytes)), 1);
        fs::write(folder.join(&new), bytes)?;
        fs::remove_file(file)?;
        renamed.push((name, new));
    }
    Ok(with_names(&html, &renamed))
}

/// A text in which files go by their new names.
fn with_names(text: &str, renamed: &[(&str, String)]) -> String {
    renamed.iter().fold(text.to_owned(), |text, (old, new)| text.replace(old, new))
}

const VERSION: &str = "const VERSION = \"unstamped\";";
const FILES: &str = "const FILES = [];";

/// The service worker with the list of files and a version that changes when any of them (or the worker) does.
fn worker(template: &str, contents: &[(String, Vec<u8>)]) -> Result<String> {
    for line in [VERSION, FILES] {
        if template.matches(line).count() != 1 {
            bail!("static/sw.js must hold exactly one line `{line}`");
        }
    }
    let mut all = template.as_bytes().to_vec();
    let mut list = String::new();
    for (name, bytes) in contents {
        all.extend_from_slice(name.as_bytes());
        all.push(0);
        all.extend_from_slice(bytes);
        // A host may answer `index.html` with a redirect to its folder; the folder's own address always works.
        let address = if name == "index.html" { "./" } else { name };
        list.extend(["\n  ", &serde_json::Value::from(address).to_string(), ","]);
    }
    let version = format!("const VERSION = \"{:016x}\";", hash(&all));
    // The comments are for the reader of static/sw.js, not for every phone; the first line says whose worker it is.
    let comment = |line: &&str| line.trim_start().starts_with("//") || line.trim_start().starts_with("/**");
    let mut lines: Vec<&str> = template.lines().take(1).collect();
    lines.extend(template.lines().skip(1).filter(|line| !comment(line) && !line.is_empty()));
    let code = lines.join("\n") + "\n";
    Ok(code.replace(VERSION, &version).replace(FILES, &format!("const FILES = [{list}\n];")))
}

/// FNV-1a, 64 bits: tells versions apart; it is no protection against anybody.
pub(crate) fn hash(bytes: &[u8]) -> u64 {
    bytes
        .iter()
        .fold(0xcbf2_9ce4_8422_2325, |state, byte| (state ^ u64::from(*byte)).wrapping_mul(0x100_0000_01b3))
}

#[cfg(test)]
mod tests {
    use super::{externalise, hash, join_styles, rename_reckoner, without_remarks, worker};

    #[test]
    fn hash_agrees_with_the_published_test_vectors() {
        // Landon Curt Noll's table of FNV-1a 64-bit results.
        assert_eq!(hash(b""), 0xcbf2_9ce4_8422_2325);
        assert_eq!(hash(b"a"), 0xaf63_dc4c_8601_ec8c);
        assert_eq!(hash(b"foobar"), 0x8594_4171_f739_67e8);
    }

    #[test]
    fn inline_scripts_move_out_and_others_stay() {
        let html = "<head><script src=\"a.js\"></script><script type=\"application/ld+json\">{}</script></head>\
                    <script type=\"module\">\nimport init from './x.js';\n</script><p>end";
        let (out, scripts) = externalise(html).expect("well-formed");
        assert_eq!(scripts.len(), 1);
        assert_eq!(scripts[0].text, "import init from './x.js';\n");
        let name = &scripts[0].name;
        assert!(out.contains(&format!("<script type=\"module\" src=\"./{name}\"></script><p>end")), "{out}");
        assert!(
            out.contains("<script src=\"a.js\"></script><script type=\"application/ld+json\">{}</script>"),
            "{out}"
        );
        assert!(externalise("<script>never ends").is_err());
    }

    #[test]
    fn the_reckoner_gets_names_that_change_with_its_contents() {
        let folder = std::env::temp_dir().join(format!("lampladder-stamp-{}", std::process::id()));
        std::fs::create_dir_all(&folder).expect("a folder");
        let names = |wasm: &str| {
            let write = |name: &str, text: &str| std::fs::write(folder.join(name), text).expect("written");
            write("reckoner_bg.wasm", wasm);
            write("reckoner.js", "fetch('reckoner_bg.wasm')");
            write(
                "reckoner_loader.js",
                "importScripts(\"./reckoner.js\");wasm_bindgen(\"./reckoner_bg.wasm\");",
            );
            rename_reckoner(&folder, String::from("<meta content=\"./reckoner_loader.js\">"))
                .expect("renamed")
        };
        let (one, other) = (names("one"), names("other"));
        assert_ne!(one, other);
        let loader = one.trim_start_matches("<meta content=\"./").trim_end_matches("\">");
        let text = std::fs::read_to_string(folder.join(loader)).expect("the file that the page names");
        let script = text.split('"').nth(1).expect("a script").trim_start_matches("./");
        assert!(
            text.contains("wasm_bindgen({module_or_path:\"./") && text.ends_with("_bg.wasm\"});"),
            "{text}"
        );
        assert!(folder.join(script).is_file() && !folder.join("reckoner.js").exists());
        let wasm = text.split('"').nth(3).expect("a program").trim_start_matches("./");
        assert_eq!(std::fs::read_to_string(folder.join(wasm)).expect("the program"), "one");
        assert_eq!(rename_reckoner(&folder, String::from("<p>")).expect("nothing to do"), "<p>");
        assert!(rename_reckoner(&folder, String::from("reckoner_loader.js")).is_err());
        std::fs::remove_dir_all(folder).expect("removed");
    }

    #[test]
    fn remarks_go_and_nothing_else() {
        assert_eq!(without_remarks("<p>a</p>\n  <!-- b\n c -->\n  <p>d</p>"), "<p>a</p>\n  <p>d</p>");
        assert_eq!(without_remarks("<p>a</p><!-- b -->c"), "<p>a</p>c");
    }

    #[test]
    fn styles_become_two_and_keep_their_order() {
        let folder = std::env::temp_dir().join(format!("lampladder-styles-{}", std::process::id()));
        std::fs::create_dir_all(&folder).expect("a folder");
        let write = |name: &str, text: &str| std::fs::write(folder.join(name), text).expect("written");
        write("a.css", "/* one */\n.a > .b,\n.c :hover {\n  margin: 0 auto;\n}\n");
        write("r.css", ".r {\n  top: 0;\n}\n");
        write("b.css", "@media (width > 40em) {\n  .d::after { content: \"+\"; }\n}\n");
        let link = |name: &str| format!("\n  <link rel=\"stylesheet\" href=\"./{name}.css\"/>");
        let rest = link("r").replace("/>", " data-rest/>");
        let (html, other) = join_styles(&folder, &format!("<head>{}{rest}{}\n</head>", link("a"), link("b")))
            .expect("joined");
        let name = html.split("./").nth(1).and_then(|text| text.split('"').next()).expect("a name");
        assert_eq!(html, format!("<head>\n  <link rel=\"stylesheet\" href=\"./{name}\">\n</head>"));
        let read = |name: &str| std::fs::read_to_string(folder.join(name)).expect("a style sheet");
        let style = ".a > .b,.c :hover{margin:0 auto}@media (width > 40em){.d::after{content:\"+\"}}";
        assert_eq!((read(name).as_str(), read(&other).as_str()), (style, ".r{top:0}"));
        assert!(["a.css", "b.css", "r.css"].iter().all(|name| !folder.join(name).exists()));
        std::fs::remove_dir_all(folder).expect("removed");
    }

    #[test]
    fn the_version_changes_with_any_file_and_with_the_worker() {
        let template = "const VERSION = \"unstamped\";\nconst FILES = [];\n";
        let page = |text: &str| vec![("index.html".to_owned(), text.as_bytes().to_vec())];
        let first = worker(template, &page("a")).expect("stamped");
        assert!(first.contains("const FILES = [\n  \"./\",\n];"), "{first}");
        assert_ne!(first, worker(template, &page("b")).expect("stamped"));
        assert_ne!(
            first.lines().next(),
            worker(&format!("{template}// changed"), &page("a")).expect("stamped").lines().next()
        );
        assert!(worker("const FILES = [];", &page("a")).is_err());
    }
}
