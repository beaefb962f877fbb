//! Where everything goes.

use std::collections::{BTreeMap, BTreeSet, HashMap};

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
    /// A place in the table of each function of the first part that the rest calls.
    pub(super) lent: BTreeMap<u32, u32>,
    /// The number of [`WAIT`] in the first part.
    pub(super) wait: u32,
}

impl Plan {
    pub(super) fn of(program: &Program<'_>, moved: Vec<bool>) -> Self {
        let all = || (0..).zip(&program.functions).map(|(function, _)| function);
        let mut placed = BTreeMap::new();
        for (&place, &function) in &program.places {
            placed.entry(function).or_insert(place);
        }
        let (mut gates, mut lent) = (BTreeSet::new(), BTreeSet::new());
        for function in all() {
            for called in program.calls(function) {
                match (moved[function as usize], moved[called as usize]) {
                    (false, true) => _ = gates.insert(called),
                    (true, false) => _ = lent.insert(called),
                    _ => {}
                }
            }
        }
        gates.extend(placed.keys().filter(|function| moved[**function as usize]));
        let mut table_size = program.table_size;
        let mut with_places = |functions: BTreeSet<u32>| -> BTreeMap<u32, u32> {
            let mut new = || {
                table_size += 1;
                table_size - 1
            };
            let mut place = |function| placed.get(function).copied().unwrap_or_else(&mut new);
            functions.iter().map(|function| (*function, place(function))).collect()
        };
        let (gates, lent) = (with_places(gates), with_places(lent));
        // The imported ones keep their numbers; the new import stands between them and the others.
        let wait = program.imported;
        let mut staying: HashMap<u32, u32> = (0..wait).map(|function| (function, function)).collect();
        let own = all().skip(wait as usize).filter(|&function| !moved[function as usize]);
        staying.extend(own.zip(wait + 1..));
        let moving = all().filter(|&function| moved[function as usize]).collect();
        Self { moved, gates, table_size, staying, moving, lent, wait }
    }

    /// The place in the table through which one part calls a function of the other.
    pub(super) fn place(&self, function: u32) -> Option<u32> {
        self.gates.get(&function).or_else(|| self.lent.get(&function)).copied()
    }

    /// The number in the first part of the stand-in at a gate.
    pub(super) fn stand_in(&self, program: &Program<'_>, function: u32) -> Option<u32> {
        let nth = self.gates.keys().position(|&gate| gate == function)?;
        let first = program.functions.len() - self.moving.len() + 1;
        u32::try_from(first + nth).ok()
    }
}
