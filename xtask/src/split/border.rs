//! What both parts know: places in the table of functions, and the names under which the first part lends.

use std::collections::BTreeMap;
use std::convert::Infallible;

use wasm_encoder::reencode::Reencode;
use wasm_encoder::{ConstExpr, ElementSection, Elements, Function, Instruction};
use wasmparser::{FunctionBody, Operator};

use super::Outcome;
use super::plan::Plan;
use super::program::Program;

/// A call through the table.
pub(super) fn through(function: &mut Function, table_index: u32, place: u32, type_index: u32) {
    function
        .instruction(&Instruction::I32Const(place.cast_signed()))
        .instruction(&Instruction::CallIndirect { type_index, table_index });
}

/// A function's body, whose calls of functions that are `far` go through the table.
pub(super) fn body_reaching<R: Reencode<Error = Infallible>>(
    writer: &mut R,
    body: &FunctionBody<'_>,
    program: &Program<'_>,
    plan: &Plan,
    far: impl Fn(u32) -> bool,
) -> Outcome<Function> {
    let mut function = writer.new_function_with_parsed_locals(body)?;
    let mut operators = body.get_operators_reader()?;
    while !operators.eof() {
        match operators.read()? {
            Operator::Call { function_index } if far(function_index) => {
                let kind = program.functions[function_index as usize];
                through(&mut function, program.table, plan.place(function_index).unwrap_or_default(), kind);
            }
            operator => {
                function.instruction(&writer.instruction(operator)?);
            }
        }
    }
    Ok(function)
}

pub(super) fn active(elements: &mut ElementSection, table: u32, start: u32, functions: Vec<u32>) {
    let offset = ConstExpr::i32_const(start.cast_signed());
    elements.active((table > 0).then_some(table), &offset, Elements::Functions(functions.into()));
}

/// Places in a row, each with the first of them.
pub(super) fn runs(places: &BTreeMap<u32, u32>) -> Vec<(u32, Vec<u32>)> {
    let mut runs: Vec<(u32, Vec<u32>)> = Vec::new();
    let mut next = None;
    for (&place, &function) in places {
        match runs.last_mut() {
            Some((_, run)) if next == Some(place) => run.push(function),
            _ => runs.push((place, vec![function])),
        }
        next = Some(place + 1);
    }
    runs
}

/// `a`, `b` … `z`, `ba` …: the digits of a number to the base of 26.
pub(super) fn short(number: usize) -> String {
    let digit = char::from(b'a' + u8::try_from(number % 26).unwrap_or_default());
    let before = if number >= 26 { short(number / 26) } else { String::new() };
    before + digit.encode_utf8(&mut [0; 4])
}
