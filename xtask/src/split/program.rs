//! What must be known of a program to cut it.

use std::borrow::Cow;
use std::collections::{BTreeMap, HashMap};

use anyhow::{Result, bail};
use wasm_encoder::reencode::{self, Reencode};
use wasm_encoder::{EntityType, ExportKind};
use wasmparser::{
    ElementItems, ElementKind, ElementSectionReader, ExternalKind, FuncType, FunctionBody, KnownCustom, Name,
    Operator, Parser, Payload, TypeRef,
};

use super::{Marks, told};

/// What must be known of a program to cut it.
pub(super) struct Program<'a> {
    pub(super) types: Vec<FuncType>,
    /// Type of each function, the imported ones first.
    pub(super) functions: Vec<u32>,
    pub(super) imported: u32,
    pub(super) module: &'a str,
    pub(super) bodies: Vec<FunctionBody<'a>>,
    pub(super) names: HashMap<u32, String>,
    exported: Vec<u32>,
    /// The function in each place of the table of functions.
    pub(super) places: BTreeMap<u32, u32>,
    /// Which table that is, and all tables, memories and globals.
    pub(super) table: u32,
    pub(super) table_size: u32,
    pub(super) shared: Vec<(ExportKind, EntityType)>,
}

impl<'a> Program<'a> {
    pub(super) fn read(wasm: &'a [u8]) -> Result<Self> {
        let mut program = Self {
            types: Vec::new(),
            functions: Vec::new(),
            imported: 0,
            module: "",
            bodies: Vec::new(),
            names: HashMap::new(),
            exported: Vec::new(),
            places: BTreeMap::new(),
            table: 0,
            table_size: 0,
            shared: Vec::new(),
        };
        for payload in Parser::new(0).parse_all(wasm) {
            program.take(payload?)?;
        }
        Ok(program)
    }

    fn take(&mut self, payload: Payload<'a>) -> Result<()> {
        let mut same = reencode::RoundtripReencoder;
        match payload {
            Payload::TypeSection(types) => {
                for one in types.into_iter_err_on_gc_types() {
                    self.types.push(one?);
                }
            }
            Payload::ImportSection(imports) => {
                for import in imports.into_imports() {
                    let import = import?;
                    let TypeRef::Func(kind) = import.ty else {
                        bail!("imports {}, no function", import.name)
                    };
                    self.module = import.module;
                    self.functions.push(kind);
                    self.imported += 1;
                }
            }
            Payload::FunctionSection(kinds) => {
                for kind in kinds {
                    self.functions.push(kind?);
                }
            }
            Payload::TableSection(tables) => {
                for (index, table) in (0..).zip(tables) {
                    let table = table?.ty;
                    if table.element_type.is_func_ref() {
                        (self.table, self.table_size) = (index, u32::try_from(table.initial)?);
                    }
                    self.shared
                        .push((ExportKind::Table, EntityType::Table(same.table_type(table).map_err(told)?)));
                }
            }
            Payload::MemorySection(memories) => {
                for memory in memories {
                    let memory = same.memory_type(memory?).map_err(told)?;
                    self.shared.push((ExportKind::Memory, EntityType::Memory(memory)));
                }
            }
            Payload::GlobalSection(globals) => {
                for global in globals {
                    let global = same.global_type(global?.ty).map_err(told)?;
                    self.shared.push((ExportKind::Global, EntityType::Global(global)));
                }
            }
            Payload::ExportSection(exports) => {
                for export in exports {
                    let export = export?;
                    if export.kind == ExternalKind::Func {
                        self.exported.push(export.index);
                    }
                }
            }
            Payload::ElementSection(elements) => self.take_places(elements)?,
            Payload::CodeSectionEntry(body) => self.bodies.push(body),
            Payload::StartSection { .. } => bail!("starts by itself, which no script could wait for"),
            Payload::CustomSection(custom) => {
                if let KnownCustom::Name(names) = custom.as_known() {
                    for name in names {
                        if let Name::Function(names) = name? {
                            for name in names {
                                let name = name?;
                                self.names.insert(name.index, name.name.to_owned());
                            }
                        }
                    }
                }
            }
            _ => {}
        }
        Ok(())
    }

    fn take_places(&mut self, elements: ElementSectionReader<'a>) -> Result<()> {
        for element in elements {
            let element = element?;
            let ElementKind::Active { offset_expr, .. } = element.kind else {
                bail!("functions that wait for a place in a table");
            };
            let Operator::I32Const { value } = offset_expr.get_operators_reader().read()? else {
                bail!("a place in a table that must be computed");
            };
            let ElementItems::Functions(functions) = element.items else {
                bail!("places in a table that must be computed");
            };
            for (place, function) in (u32::try_from(value)?..).zip(functions) {
                self.places.insert(place, function?);
            }
        }
        Ok(())
    }

    pub(super) fn body(&self, function: u32) -> Option<&FunctionBody<'a>> {
        self.bodies.get(function.checked_sub(self.imported)? as usize)
    }

    pub(super) fn calls(&self, function: u32) -> Vec<u32> {
        let operators = self.body(function).and_then(|body| body.get_operators_reader().ok());
        let called = |operator| match operator {
            Ok(Operator::Call { function_index }) => Some(function_index),
            _ => None,
        };
        operators.into_iter().flatten().filter_map(called).collect()
    }

    /// For each function whether it goes to the rest: its name holds a mark, or only such functions call it.
    pub(super) fn moved(&self, marks: &Marks<'_>) -> Vec<bool> {
        let marked: Vec<bool> = (0..)
            .zip(&self.functions)
            .map(|(function, _)| {
                self.body(function).is_some()
                    && !self.exported.contains(&function)
                    && self.names.get(&function).is_some_and(|name| {
                        let name = without_hashes(name);
                        marks.meant(&name)
                    })
            })
            .collect();
        let mut stays = vec![false; self.functions.len()];
        let mut waiting: Vec<u32> = self.exported.iter().chain(self.places.values()).copied().collect();
        waiting.extend(0..self.imported);
        while let Some(function) = waiting.pop() {
            let index = function as usize;
            if !marked[index] && !core::mem::replace(&mut stays[index], true) {
                waiting.extend(self.calls(function));
            }
        }
        stays.into_iter().map(|stays| !stays).collect()
    }
}

/// A name without the numbers in brackets that tell builds of a crate apart.
pub(super) fn without_hashes(name: &str) -> Cow<'_, str> {
    if !name.contains('[') {
        return Cow::Borrowed(name);
    }
    let mut out = String::with_capacity(name.len());
    let mut rest = name;
    while let Some((before, after)) = rest.split_once('[') {
        out.push_str(before);
        match after.split_once(']') {
            Some((hash, after)) if hash.len() >= 8 && hash.bytes().all(|byte| byte.is_ascii_hexdigit()) => {
                rest = after;
            }
            _ => {
                out.push('[');
                rest = after;
            }
        }
    }
    Cow::Owned(out + rest)
}
