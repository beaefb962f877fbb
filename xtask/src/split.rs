//! A program cut in two: what a first answer needs, and the rest, which is fetched while a person reads.
//!
//! Functions go by name: those whose name holds a mark, and all that nothing else calls. The first part calls them
//! through the table of functions; until the rest has come, each place there holds a stand-in that waits for it, so the
//! cut can cost time and never an answer. Memory, table and globals stay with the first part, and so does all data.
mod border;
mod first;
mod plan;
mod program;
mod rest;

use std::convert::Infallible;

use anyhow::{Context, Result, anyhow};
use wasm_encoder::reencode::Error;

use plan::Plan;
use program::Program;

/// What the script calls to wait for the rest.
pub const WAIT: &str = "__wbg_later";
/// The module name under which the rest imports from the first part.
pub const FIRST: &str = "f";

/// A program in two parts.
#[derive(Debug)]
pub struct Parts {
    /// Begins, and imports [`WAIT`] beside what the whole imported.
    pub first: Vec<u8>,
    /// Imports what it needs from the first part.
    pub rest: Vec<u8>,
}

/// Parts of names that tell where a function goes.
#[derive(Debug, Default)]
pub struct Marks<'a> {
    go: Vec<&'a str>,
    stay: Vec<&'a str>,
}

impl<'a> Marks<'a> {
    /// The marks in a text: one a line, but for empty lines and those that begin with `#`. One that begins with `!`
    /// makes an exception of the others.
    pub fn of(text: &'a str) -> Self {
        let mut marks = Self::default();
        for line in text.lines().map(str::trim).filter(|line| !line.is_empty() && !line.starts_with('#')) {
            match line.strip_prefix('!') {
                Some(stay) => marks.stay.push(stay),
                None => marks.go.push(line),
            }
        }
        marks
    }

    fn meant(&self, name: &str) -> bool {
        let bears = |marks: &[&str]| marks.iter().any(|mark| name.contains(mark));
        bears(&self.go) && !bears(&self.stay)
    }
}

/// Cuts a program with a name section. Without a function that bears one of the marks there is nothing to cut.
///
/// # Errors
/// When the program is none, or of a form that this does not know.
pub fn split(wasm: &[u8], marks: &Marks<'_>) -> Result<Option<Parts>> {
    let program = Program::read(wasm)?;
    let moved = program.moved(marks);
    if !moved.contains(&true) {
        return Ok(None);
    }
    let plan = Plan::of(&program, moved);
    let parts = Parts { first: first::first(wasm, &program, &plan)?, rest: rest::rest(&program, &plan)? };
    for part in [&parts.first, &parts.rest] {
        wasmparser::validate(part).context("the cut has made no valid program")?;
    }
    Ok(Some(parts))
}

type Outcome<T> = Result<T, Error<Infallible>>;

#[expect(clippy::needless_pass_by_value, reason = "for `map_err`")]
fn told(error: Error<Infallible>) -> anyhow::Error {
    anyhow!("the program cannot be cut: {error}")
}

#[cfg(test)]
mod tests {
    use super::border::{active, short};
    use super::program::without_hashes;
    use super::*;
    use wasm_encoder::{
        CodeSection, ElementSection, EntityType, ExportKind, ExportSection, Function, FunctionSection,
        ImportSection, Instruction, Module, TableSection, TypeSection,
    };
    use wasm_encoder::{MemorySection, MemoryType, NameMap, NameSection, RefType, TableType, ValType};

    /// A program of five functions: `start` is exported and calls `rare::one`; that calls `help`, which nobody else
    /// does, and the imported function; `rare::two` and `often` have places in the table.
    fn program() -> Vec<u8> {
        let mut types = TypeSection::new();
        types.ty().function([ValType::I32], [ValType::I32]);
        let mut imports = ImportSection::new();
        imports.import("./page_bg.js", "__wbg_a", EntityType::Function(0));
        let (mut functions, mut tables, mut memories) =
            (FunctionSection::new(), TableSection::new(), MemorySection::new());
        let names = ["start", "page[0123456789abcdef]::rare::one", "help", "page::rare::two", "often"];
        for _ in names {
            functions.function(0);
        }
        tables.table(TableType {
            element_type: RefType::FUNCREF,
            minimum: 3,
            maximum: Some(3),
            table64: false,
            shared: false,
        });
        memories.memory(MemoryType {
            minimum: 1,
            maximum: None,
            memory64: false,
            shared: false,
            page_size_log2: None,
        });
        let mut exports = ExportSection::new();
        exports.export("memory", ExportKind::Memory, 0).export("start", ExportKind::Func, 1);
        let mut elements = ElementSection::new();
        active(&mut elements, 0, 1, vec![4, 5]);
        let mut code = CodeSection::new();
        let calls: [&[u32]; 5] = [&[2], &[3, 0], &[], &[], &[0]];
        for called in calls {
            let mut function = Function::new([]);
            function.instruction(&Instruction::LocalGet(0));
            for &called in called {
                function.instruction(&Instruction::Call(called));
            }
            code.function(function.instruction(&Instruction::End));
        }
        let mut known = NameMap::new();
        for (index, name) in (1..).zip(names) {
            known.append(index, name);
        }
        let mut section = NameSection::new();
        section.functions(&known);
        let mut module = Module::new();
        module.section(&types).section(&imports).section(&functions).section(&tables).section(&memories);
        module.section(&exports).section(&elements).section(&code).section(&section);
        module.finish()
    }

    #[test]
    fn what_is_marked_goes_and_takes_along_what_only_it_calls() {
        let wasm = program();
        let whole = Program::read(&wasm).expect("a program");
        assert_eq!(whole.moved(&Marks::of("page::rare")), [false, false, true, true, true, false]);
        let parts = split(&wasm, &Marks::of("page::rare")).expect("cut").expect("two parts");
        let first = Program::read(&parts.first).expect("the first part");
        let rest = Program::read(&parts.rest);
        // The imported function, the wait, what stays, and a stand-in for each of the two that can be called.
        assert_eq!((first.imported, first.functions.len()), (2, 6));
        assert_eq!((first.table_size, first.places.len()), (5, 4), "one more place for each that had none");
        assert!(rest.is_err(), "the rest imports a table, so it is no program that could be cut again");
        assert!(split(&wasm, &Marks::of("nothing")).expect("read").is_none());
    }

    #[test]
    fn an_exported_function_stays() {
        let wasm = program();
        let whole = Program::read(&wasm).expect("a program");
        assert!(!whole.moved(&Marks::of("start"))[1]);
    }

    #[test]
    fn names_lose_the_numbers_of_their_build_and_nothing_else() {
        assert_eq!(
            without_hashes("<a[0123456789abcdef]::B as c[fedcba98]::D<[f64]>>::e"),
            "<a::B as c::D<[f64]>>::e"
        );
        assert_eq!(without_hashes("open["), "open[");
    }

    #[test]
    fn marks_are_lines_and_may_make_exceptions() {
        let marks = Marks::of("# a remark\n\nweb::seen\n  core::fuse\n!web::seen::new\n");
        assert!(marks.meant("<a_web::seen::Seen>::at") && marks.meant("a_core::fuse"));
        assert!(!marks.meant("a_web::seen::new::{closure#0}") && !marks.meant("a remark"));
    }

    #[test]
    fn border_names_are_all_different() {
        let names: std::collections::BTreeSet<String> = (0..2000).map(short).collect();
        assert_eq!(names.len(), 2000);
    }
}
