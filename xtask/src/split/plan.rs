//! Where everything goes.

use std::collections::{BTreeMap, HashMap};

use super::program::Program;

/// Where everything goes.
pub(super) struct Plan {
    pub(super) moved: Vec<bool>,
    /// A place in the table of each function of the rest that has to be reached from outside it.
    pub(super) gates: BTreeMap<u32, u32>,
    pub(super) table_size: u32,
    /// The new number of each function that stays.
    pub(super) staying: HashMap<u32, u32>,
    /// The rest's functions in their order.
    pub(super) moving: Vec<u32>,
    /// The functions of the first part that the rest calls.
    pub(super) needed: Vec<u32>,
    /// The number of [`WAIT`] in the first part.
    pub(super) wait: u32,
}

impl Plan {
    pub(super) fn of(program: &Program<'_>, moved: Vec<bool>) -> Self {
        let all = || (0..).zip(&program.functions).map(|(function, _)| function);
        let mut gates = BTreeMap::new();
        for (&place, &function) in &program.places {
            if moved[function as usize] {
                gates.entry(function).or_insert(place);
            }
        }
        let mut table_size = program.table_size;
        let mut needed = Vec::new();
        for function in all() {
            for called in program.calls(function) {
                match (moved[function as usize], moved[called as usize]) {
                    (false, true) => {
                        gates.entry(called).or_insert_with(|| {
                            table_size += 1;
                            table_size - 1
                        });
                    }
                    (true, false) => needed.push(called),
                    _ => {}
                }
            }
        }
        needed.sort_unstable();
        needed.dedup();
        // The imported ones keep their numbers; the new import stands between them and the others.
        let wait = program.imported;
        let mut staying: HashMap<u32, u32> = (0..wait).map(|function| (function, function)).collect();
        let own = all().skip(wait as usize).filter(|&function| !moved[function as usize]);
        staying.extend(own.zip(wait + 1..));
        let moving = all().filter(|&function| moved[function as usize]).collect();
        Self { moved, gates, table_size, staying, moving, needed, wait }
    }

    /// The number in the first part of the stand-in at a gate.
    pub(super) fn stand_in(&self, program: &Program<'_>, function: u32) -> Option<u32> {
        let nth = self.gates.keys().position(|&gate| gate == function)?;
        let first = program.functions.len() - self.moving.len() + 1;
        u32::try_from(first + nth).ok()
    }
}
