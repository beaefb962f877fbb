//! The catalogues of texts, web/words/*.txt, as the page fetches them: texts alone, in files whose names change with their
//! contents, told to the page by a `<meta>` each.

use std::fs;
use std::path::Path;

use anyhow::{Context, Result, anyhow, bail, ensure};

use crate::{files, pack, stamp};

// The form of a catalogue is the page's own business; this is the very same file.
#[path = "../../web/src/words/catalogue.rs"]
pub mod catalogue;

/// What every other catalogue is held against.
const ENGLISH: &str = "en";
/// The line of index.html that gives way to the names of the files.
const PLACE: &str = "<meta name=\"words\">";
/// The script that chooses the language.
const SCRIPT: &str = "language.js";

/// Writes the texts of the catalogues in `source` into `folder`, and their names into its page.
///
/// # Errors
/// A catalogue that cannot be read, or whose keys or places differ from English's; a page that does not ask for texts.
pub fn publish(folder: &Path, source: &Path) -> Result<()> {
    let mut all = Vec::new();
    for (name, path) in files::below(source)? {
        let tag = name.strip_suffix(".txt").with_context(|| format!("{} is no catalogue", path.display()))?;
        all.push((tag.to_owned(), fs::read_to_string(&path)?));
    }
    let english = all.iter().find(|(tag, _)| tag == ENGLISH).context("there is no catalogue in English")?;
    let english = english.1.clone();
    let index = folder.join("index.html");
    let mut html = fs::read_to_string(&index)?;
    ensure!(html.matches(PLACE).count() == 1, "index.html must hold exactly one `{PLACE}`");
    let mut metas = Vec::new();
    for (tag, text) in &all {
        let parts = texts(&english, text).with_context(|| format!("web/words/{tag}.txt"))?;
        for (part, texts) in ["words", "later"].into_iter().zip(parts) {
            let name = format!("{part}-{tag}-{:016x}.txt", stamp::hash(texts.as_bytes()));
            metas.push(format!("<meta name=\"{part}-{tag}\" content=\"./{name}\">"));
            fs::write(folder.join(name), texts)?;
        }
    }
    html = html.replace(PLACE, &metas.join("\n  "));
    let script = fs::read_to_string(folder.join(SCRIPT)).with_context(|| format!("{SCRIPT} is not there"))?;
    let script = pack::unindented(&script);
    let name = format!("language-{:016x}.js", stamp::hash(script.as_bytes()));
    fs::remove_file(folder.join(SCRIPT))?;
    fs::write(folder.join(&name), script)?;
    fs::write(index, html.replace(SCRIPT, &name))?;
    Ok(())
}

/// The texts of a catalogue, those of the first screen and the later ones, if it says what English says.
fn texts(english: &str, text: &str) -> Result<[String; 2]> {
    let read = |text| {
        catalogue::entries(text)
            .map_err(|catalogue::Unreadable { line }| anyhow!("line {line} is no `key = text`"))
    };
    let english = read(english).context("English")?;
    let entries = read(text)?;
    for (index, (key, text)) in english.iter().enumerate() {
        let Some((other, translated)) = entries.get(index) else { bail!("`{key}` is missing") };
        ensure!(key == other, "`{other}` stands where English has `{key}`");
        let (places, wanted) = (catalogue::places(translated), catalogue::places(text));
        ensure!(places == wanted, "`{key}` has the places {places:?}, English {wanted:?}");
    }
    ensure!(entries.len() == english.len(), "`{}` is not in English", entries[english.len()].0);
    let (first, later) = catalogue::parts(&entries);
    Ok([catalogue::texts(first), catalogue::texts(later)])
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_catalogue_that_differs_from_english_is_refused() {
        let english = "a = one {0}\nb = two\nreplay.c = three\n";
        let german = texts(english, "# eins\na = {0} eins\nb = zwei\nreplay.c = drei\n").expect("the same");
        assert_eq!(german, ["{0} eins\nzwei", "drei"]);
        let english = "a = one {0}\nb = two\n";
        for (bad, word) in [
            ("a = eins {0}\n", "missing"),
            ("b = zwei\na = eins {0}\n", "stands where"),
            ("a = eins\nb = zwei\n", "places"),
            ("a = eins {0}\nb = zwei\nc = drei\n", "not in English"),
            ("a = eins {0}\nb zwei\n", "line 2"),
        ] {
            let error = texts(english, bad).expect_err("refused").to_string();
            assert!(error.contains(word), "{error}");
        }
    }

    #[test]
    fn files_bear_names_that_the_page_knows() {
        let folder = std::env::temp_dir().join(format!("lampladder-words-{}", std::process::id()));
        let source = folder.join("words");
        fs::create_dir_all(&source).expect("a folder");
        let write = |path: &Path, text: &str| fs::write(path, text).expect("written");
        write(&source.join("en.txt"), "a = one\n");
        write(&source.join("de.txt"), "a = eins\n");
        write(&folder.join("language.js"), "choose()");
        write(&folder.join("index.html"), "<meta name=\"words\"><script src=\"./language.js\"></script>");
        publish(&folder, &source).expect("published");
        let html = fs::read_to_string(folder.join("index.html")).expect("a page");
        let name =
            html.split("name=\"words-de\" content=\"./").nth(1).and_then(|rest| rest.split('"').next());
        assert_eq!(fs::read_to_string(folder.join(name.expect("named"))).expect("texts"), "eins");
        let script = html.split("src=\"./").nth(1).and_then(|rest| rest.split('"').next()).expect("a script");
        assert_eq!(fs::read_to_string(folder.join(script)).expect("the script"), "choose()\n");
        fs::remove_dir_all(folder).expect("removed");
    }
}
