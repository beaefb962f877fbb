//! Writes the first part.

use std::collections::HashMap;
use std::convert::Infallible;

use anyhow::Result;
use wasm_encoder::reencode::{self, Reencode};
use wasm_encoder::{
    CodeSection, ElementSection, EntityType, ExportSection, Function, FunctionSection, ImportSection,
    Instruction, Module, TableSection, TypeSection,
};
use wasmparser::{CodeSectionReader, ElementSectionReader, FunctionBody, FunctionSectionReader, Parser};

use super::border::{active, body_reaching, runs, short, through};
use super::plan::Plan;
use super::program::Program;
use super::{Outcome, WAIT, told};

pub(super) fn first(wasm: &[u8], program: &Program<'_>, plan: &Plan) -> Result<Vec<u8>> {
    let mut module = Module::new();
    First { program, plan }.parse_core_module(&mut module, Parser::new(0), wasm).map_err(told)?;
    Ok(module.finish())
}

/// Writes the first part.
struct First<'a> {
    program: &'a Program<'a>,
    plan: &'a Plan,
}

impl Reencode for First<'_> {
    type Error = Infallible;

    fn function_index(&mut self, old: u32) -> Outcome<u32> {
        let staying = self.plan.staying.get(&old).copied();
        Ok(staying.or_else(|| self.plan.stand_in(self.program, old)).unwrap_or(old))
    }

    fn parse_type_section(
        &mut self,
        types: &mut TypeSection,
        section: wasmparser::TypeSectionReader<'_>,
    ) -> Outcome<()> {
        reencode::utils::parse_type_section(self, types, section)?;
        types.ty().function([], []);
        Ok(())
    }

    fn parse_import_section(
        &mut self,
        imports: &mut ImportSection,
        section: wasmparser::ImportSectionReader<'_>,
    ) -> Outcome<()> {
        reencode::utils::parse_import_section(self, imports, section)?;
        let nothing = u32::try_from(self.program.types.len()).unwrap_or_default();
        imports.import(self.program.module, WAIT, EntityType::Function(nothing));
        Ok(())
    }

    fn parse_function_section(
        &mut self,
        section: &mut FunctionSection,
        _: FunctionSectionReader<'_>,
    ) -> Outcome<()> {
        let kinds = &self.program.functions;
        let stays = |function: &usize| !self.plan.moved[*function];
        for function in (self.program.imported as usize..kinds.len()).filter(stays) {
            section.function(kinds[function]);
        }
        for &gate in self.plan.gates.keys() {
            section.function(kinds[gate as usize]);
        }
        Ok(())
    }

    fn parse_table_section(
        &mut self,
        tables: &mut TableSection,
        section: wasmparser::TableSectionReader<'_>,
    ) -> Outcome<()> {
        for (index, table) in (0..).zip(section) {
            let mut kind = self.table_type(table?.ty)?;
            if index == self.program.table {
                kind.minimum = self.plan.table_size.into();
                kind.maximum = kind.maximum.map(|most| most.max(kind.minimum));
            }
            tables.table(kind);
        }
        Ok(())
    }

    fn parse_export_section(
        &mut self,
        exports: &mut ExportSection,
        section: wasmparser::ExportSectionReader<'_>,
    ) -> Outcome<()> {
        reencode::utils::parse_export_section(self, exports, section)?;
        let mut kinds = HashMap::new();
        for (nth, (kind, _)) in self.program.shared.iter().enumerate() {
            let index = kinds.entry(format!("{kind:?}")).or_insert(0_u32);
            exports.export(&short(nth), *kind, *index);
            *index += 1;
        }
        Ok(())
    }

    fn parse_element_section(
        &mut self,
        elements: &mut ElementSection,
        _: ElementSectionReader<'_>,
    ) -> Outcome<()> {
        let mut places = self.program.places.clone();
        places.extend(
            self.plan.gates.iter().chain(&self.plan.lent).map(|(&function, &place)| (place, function)),
        );
        for (start, functions) in runs(&places) {
            let functions: Vec<u32> =
                functions.into_iter().map(|old| self.function_index(old)).collect::<Outcome<_>>()?;
            active(elements, self.program.table, start, functions);
        }
        Ok(())
    }

    fn parse_code_section(&mut self, section: &mut CodeSection, code: CodeSectionReader<'_>) -> Outcome<()> {
        for (function, body) in (self.program.imported as usize..).zip(code) {
            if !self.plan.moved[function] {
                self.parse_function_body(section, body?)?;
            }
        }
        for (&gate, &place) in &self.plan.gates {
            let kind = self.program.functions[gate as usize];
            let arguments = self.program.types.get(kind as usize).map_or(0, |kind| kind.params().len());
            let mut function = Function::new([]);
            function.instruction(&Instruction::Call(self.plan.wait));
            for argument in (0..).take(arguments) {
                function.instruction(&Instruction::LocalGet(argument));
            }
            through(&mut function, self.program.table, place, kind);
            section.function(function.instruction(&Instruction::End));
        }
        Ok(())
    }

    fn parse_function_body(&mut self, code: &mut CodeSection, body: FunctionBody<'_>) -> Outcome<()> {
        let (program, plan) = (self.program, self.plan);
        let far = |function: u32| plan.moved[function as usize];
        code.function(&body_reaching(self, &body, program, plan, far)?);
        Ok(())
    }

    // The names have done their work.
    fn parse_custom_section(
        &mut self,
        _: &mut Module,
        _: wasmparser::CustomSectionReader<'_>,
    ) -> Outcome<()> {
        Ok(())
    }
}
