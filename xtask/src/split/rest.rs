//! Writes the rest.

use std::collections::{BTreeMap, HashMap};
use std::convert::Infallible;

use anyhow::{Context, Result};
use wasm_encoder::reencode::Reencode;
use wasm_encoder::{
    CodeSection, ElementSection, EntityType, FunctionSection, ImportSection, Module, TypeSection,
};

use super::border::{active, body_reaching, runs, short};
use super::plan::Plan;
use super::program::Program;
use super::{FIRST, Outcome, told};

/// Writes the rest.
struct Rest {
    numbers: HashMap<u32, u32>,
}

impl Reencode for Rest {
    type Error = Infallible;

    fn function_index(&mut self, old: u32) -> Outcome<u32> {
        Ok(self.numbers.get(&old).copied().unwrap_or(old))
    }
}

pub(super) fn rest(program: &Program<'_>, plan: &Plan) -> Result<Vec<u8>> {
    let numbers = plan.moving.iter().copied().zip(0..).collect();
    let mut writer = Rest { numbers };
    let (mut types, mut imports) = (TypeSection::new(), ImportSection::new());
    for kind in &program.types {
        let kind = writer.func_type(kind.clone()).map_err(told)?;
        types.ty().func_type(&kind);
    }
    for (nth, (_, kind)) in program.shared.iter().enumerate() {
        let mut kind = *kind;
        if let EntityType::Table(table) = &mut kind {
            // What is imported may be larger than what is asked for; the first part's table has grown.
            table.maximum = None;
        }
        imports.import(FIRST, &short(nth), kind);
    }
    let (mut functions, mut code) = (FunctionSection::new(), CodeSection::new());
    for &function in &plan.moving {
        functions.function(program.functions[function as usize]);
        let body = program.body(function).context("an imported function stays where it is")?;
        let far = |function: u32| !plan.moved[function as usize];
        code.function(&body_reaching(&mut writer, body, program, plan, far).map_err(told)?);
    }
    let mut places: BTreeMap<u32, u32> =
        plan.gates.iter().map(|(&function, &place)| (place, function)).collect();
    places.extend(program.places.iter().filter(|(_, function)| plan.moved[**function as usize]));
    let mut elements = ElementSection::new();
    for (start, run) in runs(&places) {
        let run =
            run.into_iter().map(|old| writer.function_index(old)).collect::<Outcome<_>>().map_err(told)?;
        active(&mut elements, program.table, start, run);
    }
    let mut module = Module::new();
    module.section(&types).section(&imports).section(&functions).section(&elements).section(&code);
    Ok(module.finish())
}
