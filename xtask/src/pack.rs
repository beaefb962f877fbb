//! A WebAssembly file rewritten so that it packs better: short names at its border with JavaScript, and functions that
//! are alike beside each other. What the program does stays the same.
//!
//! The names that wasm-bindgen makes end in sixteen random digits each, twice, which no packing makes smaller; and gzip
//! remembers no more than the last 32 KiB.

use std::collections::{BTreeMap, HashMap};
use std::convert::Infallible;

use anyhow::{Context, Result, anyhow, bail};
use wasm_encoder::reencode::{Error, Reencode};
use wasm_encoder::{CodeSection, ExportSection, FunctionSection, ImportSection, Module};
use wasmparser::{CodeSectionReader, Export, FunctionSectionReader, Imports, Parser, Payload, TypeRef};

/// New names for what a file imports and exports.
pub type Names = BTreeMap<String, String>;

/// The module name that all imports get.
const MODULE: &str = "b";

/// Rewrites a file and the script that loads it. The script must be wasm-bindgen's for that file.
///
/// # Errors
/// When the file cannot be read, or the script does not hold the file's names.
pub fn pack(wasm: &[u8], script: &str) -> Result<(Vec<u8>, String)> {
    let border = Border::of(wasm)?;
    let names = border.names(script)?;
    let smaller = smaller(wasm, MODULE, &names)?;
    let script = script.replace(&format!("\"{}\"", border.module), &format!("\"{MODULE}\""));
    Ok((smaller, renamed(&unindented(&script), &names)))
}

/// Rewrites a file that no script loads by itself: its border stays as it is.
///
/// # Errors
/// When the file cannot be read.
pub fn pack_alone(wasm: &[u8]) -> Result<Vec<u8>> {
    smaller(wasm, &Border::of(wasm)?.module, &Names::new())
}

fn smaller(wasm: &[u8], module: &str, names: &Names) -> Result<Vec<u8>> {
    let order = similar(&bodies(wasm)?);
    let plain = rewrite(wasm, module, names, None)?;
    let ordered = rewrite(wasm, module, names, Some(&order))?;
    // The order is a guess at what gzip likes.
    Ok(if packed(&ordered)? < packed(&plain)? { ordered } else { plain })
}

/// A script without the spaces at the beginning of its lines, empty lines and whole lines of comment. wasm-bindgen
/// writes no text over several lines.
pub fn unindented(script: &str) -> String {
    let remark = |line: &str| line.starts_with("//") || (line.starts_with("/**") && line.ends_with("*/"));
    let lines = script.lines().map(str::trim).filter(|line| !line.is_empty() && !remark(line));
    lines.fold(String::new(), |text, line| text + line + "\n")
}

fn packed(bytes: &[u8]) -> Result<usize> {
    Ok(crate::site::compress(bytes)?.len())
}

/// What a file shares with its script.
struct Border {
    module: String,
    imports: Vec<String>,
    exports: Vec<String>,
}

impl Border {
    fn of(wasm: &[u8]) -> Result<Self> {
        let (mut module, mut imports, mut exports) = (None::<String>, Vec::new(), Vec::new());
        for payload in Parser::new(0).parse_all(wasm) {
            match payload? {
                Payload::ImportSection(section) => {
                    for import in section.into_imports() {
                        let import = import?;
                        if module.as_deref().is_some_and(|known| known != import.module) {
                            bail!("imports from {} and from {}", module.unwrap_or_default(), import.module);
                        }
                        module = Some(import.module.to_owned());
                        imports.push(import.name.to_owned());
                    }
                }
                Payload::ExportSection(section) => {
                    for export in section {
                        exports.push(export?.name.to_owned());
                    }
                }
                _ => {}
            }
        }
        Ok(Self { module: module.context("a page's program imports something")?, imports, exports })
    }

    /// A short name for each long one, none of which stands in the script already.
    fn names(&self, script: &str) -> Result<Names> {
        let mut free = (0..).map(short).filter(|name| !words(script).any(|word| word == name));
        let mut names = Names::new();
        // `memory` is a name of the language's own, too.
        let made = |name: &&String| name.contains("__wb") || name.starts_with("wasm_bindgen__");
        for name in self.imports.iter().chain(&self.exports).filter(made) {
            if words(script).any(|word| word == name) {
                names.insert(name.clone(), free.next().context("a name")?);
            } else if self.imports.contains(name) {
                bail!("the script knows nothing of {name}");
            }
        }
        Ok(names)
    }
}

/// `$a`, `$b` … `$z`, `$aa` …
fn short(number: usize) -> String {
    let letter = |number: usize| char::from(b'a' + u8::try_from(number % 26).unwrap_or_default());
    match number.checked_sub(26) {
        None => format!("${}", letter(number)),
        Some(rest) => format!("${}{}", letter(rest / 26), letter(rest)),
    }
}

fn is_word(character: char) -> bool {
    character.is_ascii_alphanumeric() || character == '_' || character == '$'
}

fn words(script: &str) -> impl Iterator<Item = &str> {
    script.split(|character| !is_word(character)).filter(|word| !word.is_empty())
}

/// A script with whole words changed.
fn renamed(script: &str, names: &Names) -> String {
    let mut out = String::with_capacity(script.len());
    let mut rest = script;
    while let Some(first) = rest.chars().next() {
        let word = is_word(first);
        let end = rest.find(|character| is_word(character) != word).unwrap_or(rest.len());
        let (piece, after) = rest.split_at(end);
        out.push_str(names.get(piece).map_or(piece, String::as_str));
        rest = after;
    }
    out
}

fn bodies(wasm: &[u8]) -> Result<Vec<&[u8]>> {
    let mut bodies = Vec::new();
    for payload in Parser::new(0).parse_all(wasm) {
        if let Payload::CodeSectionEntry(body) = payload? {
            bodies.push(&wasm[body.range()]);
        }
    }
    Ok(bodies)
}

/// Bytes that two functions must share in a row to be a little alike.
const RUN: usize = 5;
/// A run that so many functions have makes none of them alike.
const COMMON: usize = 200;

/// An order in which each function comes soon after those that it is most like.
fn similar(bodies: &[&[u8]]) -> Vec<usize> {
    let mut holders: HashMap<&[u8], Vec<usize>> = HashMap::new();
    let runs: Vec<Vec<&[u8]>> = bodies
        .iter()
        .map(|body| {
            let mut runs: Vec<&[u8]> = body.windows(RUN).collect();
            runs.sort_unstable();
            runs.dedup();
            runs
        })
        .collect();
    for (index, runs) in runs.iter().enumerate() {
        for run in runs {
            holders.entry(run).or_default().push(index);
        }
    }
    let mut left = vec![true; bodies.len()];
    let mut order: Vec<usize> = Vec::new();
    let mut scores = vec![0_u32; bodies.len()];
    let mut next = (0..bodies.len()).max_by_key(|&index| bodies[index].len());
    while let Some(here) = next {
        left[here] = false;
        order.push(here);
        scores.fill(0);
        for (&earlier, weight) in order.iter().rev().zip([10, 6, 4]) {
            for run in &runs[earlier] {
                for &index in holders.get(run).into_iter().flatten().take(COMMON) {
                    scores[index] += weight;
                }
            }
        }
        // Alike for its size, lest every small function go beside the large ones.
        let share = |index: usize| u64::from(scores[index]) * 1_000_000 / (runs[index].len() as u64 + 20);
        next = (0..bodies.len())
            .filter(|&index| left[index])
            .max_by_key(|&index| (share(index), usize::MAX - index));
    }
    order
}

fn rewrite(wasm: &[u8], module: &str, names: &Names, order: Option<&[usize]>) -> Result<Vec<u8>> {
    let mut imported = 0;
    for payload in Parser::new(0).parse_all(wasm) {
        if let Payload::ImportSection(section) = payload? {
            for import in section.into_imports() {
                imported += u32::from(matches!(import?.ty, TypeRef::Func(_)));
            }
        }
    }
    let order =
        order.map_or_else(|| (0..bodies(wasm).map_or(0, |all| all.len())).collect(), <[usize]>::to_vec);
    let mut places = vec![0; order.len()];
    for (place, &old) in order.iter().enumerate() {
        places[old] = u32::try_from(place)?;
    }
    let mut out = Module::new();
    Rewriter { module, names, imported, order, places }
        .parse_core_module(&mut out, Parser::new(0), wasm)
        .map_err(|stop| anyhow!("the program cannot be rewritten: {stop}"))?;
    Ok(out.finish())
}

struct Rewriter<'a> {
    module: &'a str,
    names: &'a Names,
    imported: u32,
    /// Old numbers in their new order, imported functions left out.
    order: Vec<usize>,
    /// The new place of each old number.
    places: Vec<u32>,
}

type Outcome<T> = Result<T, Error<Infallible>>;

impl Rewriter<'_> {
    fn name<'a>(&'a self, name: &'a str) -> &'a str {
        self.names.get(name).map_or(name, String::as_str)
    }
}

impl Reencode for Rewriter<'_> {
    type Error = Infallible;

    fn function_index(&mut self, old: u32) -> Outcome<u32> {
        let defined = old.checked_sub(self.imported).and_then(|defined| self.places.get(defined as usize));
        Ok(defined.map_or(old, |place| self.imported + place))
    }

    fn parse_imports(&mut self, section: &mut ImportSection, imports: Imports<'_>) -> Outcome<()> {
        for import in imports {
            let (_, import) = import?;
            let kind = self.entity_type(import.ty)?;
            section.import(self.module, self.name(import.name), kind);
        }
        Ok(())
    }

    fn parse_export(&mut self, section: &mut ExportSection, export: Export<'_>) -> Outcome<()> {
        let kind = self.export_kind(export.kind)?;
        let index = self.external_index(export.kind, export.index)?;
        section.export(self.name(export.name), kind, index);
        Ok(())
    }

    fn parse_function_section(
        &mut self,
        section: &mut FunctionSection,
        types: FunctionSectionReader<'_>,
    ) -> Outcome<()> {
        let types = types.into_iter().collect::<Result<Vec<_>, _>>()?;
        for &old in &self.order {
            section.function(types[old]);
        }
        Ok(())
    }

    fn parse_code_section(&mut self, section: &mut CodeSection, code: CodeSectionReader<'_>) -> Outcome<()> {
        let code = code.into_iter().collect::<Result<Vec<_>, _>>()?;
        for old in self.order.clone() {
            self.parse_function_body(section, code[old].clone())?;
        }
        Ok(())
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use wasm_encoder::{
        EntityType, ExportKind, Function, Instruction, MemorySection, MemoryType, TypeSection, ValType,
    };

    /// An imported function and three more: the first gives 7, the second calls it and the imported one, the third
    /// gives 9. The second is exported, and so is the memory.
    fn program() -> Vec<u8> {
        let mut types = TypeSection::new();
        types.ty().function([], [ValType::I32]);
        let mut imports = ImportSection::new();
        imports.import("./page_bg.js", "__wbg_a_0123456789abcdef", EntityType::Function(0));
        let (mut functions, mut memories) = (FunctionSection::new(), MemorySection::new());
        functions.function(0).function(0).function(0);
        let limits =
            MemoryType { minimum: 1, maximum: None, memory64: false, shared: false, page_size_log2: None };
        memories.memory(limits);
        let mut exports = ExportSection::new();
        exports.export("memory", ExportKind::Memory, 0).export("__wbindgen_start", ExportKind::Func, 2);
        let mut code = CodeSection::new();
        let bodies: [&[Instruction<'_>]; 3] = [
            &[Instruction::I32Const(7)],
            &[Instruction::Call(1), Instruction::Call(0), Instruction::I32Add],
            &[Instruction::I32Const(9)],
        ];
        for body in bodies {
            let mut function = Function::new([]);
            for step in body {
                function.instruction(step);
            }
            code.function(function.instruction(&Instruction::End));
        }
        let mut module = Module::new();
        module.section(&types).section(&imports).section(&functions).section(&memories);
        module.section(&exports).section(&code);
        module.finish()
    }

    fn calls(wasm: &[u8]) -> Vec<Vec<u8>> {
        bodies(wasm).expect("a program").into_iter().map(<[u8]>::to_vec).collect()
    }

    #[test]
    fn names_get_short_on_both_sides_and_calls_follow_their_functions() {
        let wasm = program();
        let script = "const i = {\n    __wbg_a_0123456789abcdef: function() { return $a; },\n};\n\n\
                      // starts it\nload({ \"./page_bg.js\": i }).__wbindgen_start();\n";
        let (packed, text) = pack(&wasm, script).expect("packed");
        assert_eq!(text, "const i = {\n$b: function() { return $a; },\n};\nload({ \"b\": i }).$c();\n");
        let border = Border::of(&packed).expect("a program");
        assert_eq!(
            (border.module.as_str(), border.imports, border.exports),
            ("b", vec!["$b".to_owned()], vec!["memory".to_owned(), "$c".to_owned()])
        );
        let names = Names::new();
        let turned = rewrite(&wasm, MODULE, &names, Some(&[2, 0, 1])).expect("a program");
        // The caller is the last now, and calls the second of the three, behind one import.
        assert_eq!(calls(&turned)[2], b"\0\x10\x02\x10\0\x6a\x0b");
        assert_eq!(calls(&turned)[0], calls(&wasm)[2]);
        assert!(pack(&wasm, "nothing of it").is_err());
    }

    #[test]
    fn functions_that_are_alike_come_together() {
        let (long, like, other) =
            (b"0123456789abcdef".as_slice(), b"456789abcd".as_slice(), b"ZYXWVUTSRQ".as_slice());
        assert_eq!(similar(&[long, other, like]), [0, 2, 1]);
        assert!(similar(&[]).is_empty());
    }

    #[test]
    fn short_names_are_all_different() {
        let names: std::collections::BTreeSet<String> = (0..600).map(short).collect();
        assert_eq!(names.len(), 600);
        assert_eq!(
            (short(0), short(25), short(26), short(701)),
            ("$a".into(), "$z".into(), "$aa".into(), "$zz".into())
        );
    }
}
