//! Supply, bank and load as one system of differential equations.

use alloc::vec::Vec;
use core::cell::Cell;
use core::f64::consts::{PI, SQRT_2};

use super::body::{Body, Heat, MELTS_KELVIN};
use super::branch::{At, Branch, Half, Inside, Line, Mode, Offer};
use super::rosenbrock::System;
use crate::bank::Bank;
use crate::filament::Filament;
use crate::supply::Supply;

/// The loop: a source, the bank's filaments and the parts of the load side by side.
#[derive(Debug, Clone)]
pub(super) struct Circuit {
    source: Source,
    remembered: Remembered,
    /// Filaments of the bank that differ; their temperatures come first in the state.
    bodies: Vec<Body>,
    groups: Vec<Group>,
    pub(super) branches: Vec<Branch>,
    pub(super) modes: Vec<Mode>,
    pub(super) scale: Vec<f64>,
    /// Difference, volts, that a diode or converter may be past its edge before it counts.
    pub(super) edge_volts: f64,
}

/// The source behind its resistance.
#[derive(Debug, Clone, Copy)]
pub(super) struct Source {
    pub(super) crest: f64,
    /// Radian per second; 0 on direct current.
    pub(super) omega: f64,
    /// Phase at switch-on, radian.
    pub(super) phase: f64,
    pub(super) ohms: f64,
}

impl Source {
    pub(super) fn new(supply: &Supply, switch_degrees: f64) -> Self {
        if supply.is_direct() {
            // The crest of a wave that never moves on.
            return Self { crest: supply.volts(), omega: 0.0, phase: PI / 2.0, ohms: supply.ohms() };
        }
        Self {
            crest: SQRT_2 * supply.volts(),
            omega: 2.0 * PI * supply.hertz(),
            phase: switch_degrees * PI / 180.0,
            ohms: supply.ohms(),
        }
    }

    fn volts(&self, seconds: f64) -> f64 {
        self.crest * libm::sin(self.omega * seconds + self.phase)
    }
}

/// The source's last value: within one step it is asked for several times over at the same instants.
#[derive(Debug, Clone)]
struct Remembered(Cell<(f64, f64)>);

impl Remembered {
    fn volts(&self, source: &Source, seconds: f64) -> f64 {
        let (at, known) = self.0.get();
        if at == seconds {
            return known;
        }
        let volts = source.volts(seconds);
        self.0.set((seconds, volts));
        volts
    }
}

/// Equal parallel groups of the bank.
#[derive(Debug, Clone)]
struct Group {
    /// How many such groups are in series.
    in_series: f64,
    /// One over the number of lamps in the first of [`Self::members`].
    per_count: f64,
    /// Places in [`Circuit::bodies`], and how many such lamps are in parallel.
    members: Vec<(usize, f64)>,
}

/// What the loop does at one instant.
#[derive(Debug, Clone, Copy, Default)]
pub(super) struct Instant {
    /// Current, amperes.
    pub(super) amps: f64,
    /// Volts across the load.
    pub(super) volts: f64,
    /// Power into all lamps of the bank, watts.
    pub(super) bank_watts: f64,
    /// Heat given off by all lamps of the bank, watts.
    pub(super) lost_watts: f64,
}

/// How far past its edge a diode goes before it switches, over the crest and the tolerance: where a reservoir follows
/// the mains closely, the solver's own error must not look like an edge. Never below the second number.
const EDGE: f64 = 0.3;
const LEAST_EDGE: f64 = 1e-6;

/// Size of a filament's temperature, kelvin: a hundredth of what it becomes, because its error is a loss of energy,
/// which adds up, while that of a voltage or current dies away.
pub(super) const KELVIN_SIZE: f64 = 20.0;

const MOST_BODIES: usize = Bank::MOST_LAMPS;

/// Ohms of each group and heat of each body, with room for `N` of them.
struct Hot<const N: usize> {
    heats: [Heat; N],
    group_ohms: [f64; N],
    ohms: f64,
}

impl Circuit {
    /// A loop without a load yet; no bank is the mains alone.
    pub(super) fn new(source: Source, bank: Option<&Bank>, tolerance: f64) -> (Self, Vec<usize>) {
        let mut bodies = Vec::new();
        let mut groups: Vec<Group> = Vec::new();
        let mut places = Vec::new();
        let mut seen: Vec<&[crate::lamp::Lamp]> = Vec::new();
        let mut placed: Vec<Vec<usize>> = Vec::new();
        for group in bank.map_or(&[][..], Bank::groups) {
            if let Some(same) = seen.iter().position(|other| *other == group.as_slice()) {
                groups[same].in_series += 1.0;
                places.extend_from_slice(&placed[same]);
                continue;
            }
            let mut kinds: Vec<(&Filament, usize)> = Vec::new();
            let mut members: Vec<(usize, f64)> = Vec::new();
            let mut here = Vec::new();
            for lamp in group {
                let known = kinds.iter().position(|(filament, _)| *filament == lamp.filament());
                let kind = known.unwrap_or_else(|| {
                    kinds.push((lamp.filament(), bodies.len()));
                    members.push((bodies.len(), 0.0));
                    bodies.push(Body::of(lamp.filament()));
                    members.len() - 1
                });
                members[kind].1 += 1.0;
                here.push(members[kind].0);
            }
            places.extend_from_slice(&here);
            seen.push(group);
            placed.push(here);
            groups.push(Group { in_series: 1.0, per_count: 1.0 / members[0].1, members });
        }
        let scale = alloc::vec![KELVIN_SIZE; bodies.len()];
        let edge_volts = (EDGE * tolerance).max(LEAST_EDGE) * source.crest;
        let remembered = Remembered(Cell::new((f64::NAN, 0.0)));
        (
            Self {
                source,
                remembered,
                bodies,
                groups,
                branches: Vec::new(),
                modes: Vec::new(),
                scale,
                edge_volts,
            },
            places,
        )
    }

    /// Resistance of source and bank at a state, ohms.
    pub(super) fn loop_ohms(&self, state: &[f64]) -> f64 {
        let ohms =
            if self.is_plain() { self.hot::<1>(state).ohms } else { self.hot::<MOST_BODIES>(state).ohms };
        ohms + self.source.ohms
    }

    pub(super) const fn source(&self) -> &Source {
        &self.source
    }

    #[inline]
    fn hot<const N: usize>(&self, state: &[f64]) -> Hot<N> {
        let mut hot = Hot { heats: [Heat::default(); N], group_ohms: [0.0; N], ohms: 0.0 };
        for ((heat, body), kelvin) in hot.heats.iter_mut().zip(&self.bodies).zip(state) {
            *heat = body.at(*kelvin);
        }
        for (ohms, group) in hot.group_ohms.iter_mut().zip(&self.groups) {
            *ohms = match group.members.as_slice() {
                // Without the two divisions that parallel lamps of several kinds need: they are half of the cost.
                [(at, _)] => hot.heats[*at].ohms * group.per_count,
                members => 1.0 / members.iter().map(|&(at, count)| count / hot.heats[at].ohms).sum::<f64>(),
            };
            hot.ohms += group.in_series * *ohms;
        }
        hot
    }

    /// One lamp, or several alike in groups alike: the usual bank, and worth its own copy of the code.
    fn is_plain(&self) -> bool {
        self.bodies.len() <= 1
    }

    fn terminals(&self, seconds: f64, state: &[f64], ohms: f64) -> (f64, f64) {
        let here = At { seconds, state, modes: &self.modes };
        let mut line = Line::default();
        for branch in &self.branches {
            line += branch.line(here);
        }
        let volts = self.remembered.volts(&self.source, seconds);
        let share = 1.0 / (1.0 + ohms * line.siemens);
        ((line.siemens * volts + line.source_amps) * share, (volts - ohms * line.source_amps) * share)
    }

    /// The loop at one instant.
    pub(super) fn instant(&self, seconds: f64, state: &[f64]) -> Instant {
        if self.is_plain() {
            self.instant_with(seconds, state, &self.hot::<1>(state))
        } else {
            self.instant_with(seconds, state, &self.hot::<MOST_BODIES>(state))
        }
    }

    fn instant_with<const N: usize>(&self, seconds: f64, state: &[f64], hot: &Hot<N>) -> Instant {
        let (amps, volts) = self.terminals(seconds, state, hot.ohms + self.source.ohms);
        let mut lost_watts = 0.0;
        for group in &self.groups {
            for &(at, count) in &group.members {
                lost_watts += group.in_series * count * hot.heats[at].lost_watts;
            }
        }
        Instant { amps, volts, bank_watts: amps * amps * hot.ohms, lost_watts }
    }

    /// Heat stored in all lamps of the bank, joule.
    pub(super) fn stored_joules(&self, state: &[f64]) -> f64 {
        let each = |group: &Group| -> f64 {
            group.members.iter().map(|&(at, count)| count * self.bodies[at].stored_joules(state[at])).sum()
        };
        self.groups.iter().map(|group| group.in_series * each(group)).sum()
    }

    /// The first filament of the bank that is about to melt.
    pub(super) fn melting(&self, state: &[f64]) -> Option<usize> {
        state[..self.bodies.len()].iter().position(|&kelvin| kelvin > MELTS_KELVIN)
    }

    /// How far the rectifiers are from changing, each with what would change.
    pub(super) fn edges(&self, seconds: f64, state: &[f64], volts: Option<f64>, offer: &mut Offer) {
        if self.modes.is_empty() {
            return;
        }
        let volts = volts.unwrap_or_else(|| self.terminals(seconds, state, self.loop_ohms(state)).1);
        let here = At { seconds, state, modes: &self.modes };
        for branch in &self.branches {
            branch.edges(volts, here, offer);
        }
    }

    /// Whether any diodes conduct.
    pub(super) fn conducts(&self) -> bool {
        self.modes.iter().any(|mode| mode.conducts != 0.0)
    }

    /// The least of all margins.
    pub(super) fn margin(&self, seconds: f64, state: &[f64], volts: Option<f64>) -> f64 {
        let mut least = f64::INFINITY;
        self.edges(seconds, state, volts, &mut |margin, _, _| least = least.min(margin));
        least
    }

    /// A margin that counts as none, volts: a tenth of the distance between the edges of two modes.
    pub(super) fn slack(&self) -> f64 {
        0.1 * self.edge_volts
    }

    /// Changes every mode whose edge has been reached, until all agree with the state; tells of every converter that
    /// started.
    pub(super) fn settle_modes(&mut self, seconds: f64, state: &[f64], mut started: impl FnMut()) {
        let slack = self.slack();
        // Diodes, wait and start: more changes than these at one instant would be a dispute without end.
        for _ in 0..3 * self.modes.len() {
            let mut due = None;
            self.edges(seconds, state, None, &mut |margin, place, half| {
                if margin <= slack && due.is_none() {
                    due = Some((place, half));
                }
            });
            let Some((place, half)) = due else { return };
            let (_, volts) = self.terminals(seconds, state, self.loop_ohms(state));
            let here = At { seconds, state, modes: &self.modes };
            let turned = self.branches.iter().find_map(|branch| branch.turned(volts, here, place, half));
            let Some(turned) = turned else { return };
            self.modes[place] = turned;
            if half == Half::Runs && self.modes[place].runs {
                started();
            }
        }
    }

    /// When the next waiting converter starts, seconds; infinite where none waits.
    pub(super) fn due(&self) -> f64 {
        self.modes.iter().map(|mode| mode.due).fold(f64::INFINITY, f64::min)
    }

    /// What the load shows.
    pub(super) fn show(&self, state: &[f64]) -> Inside {
        let mut inside = Inside::default();
        for branch in &self.branches {
            branch.show(state, &mut inside);
        }
        inside
    }
}

impl System for Circuit {
    type Seen = Instant;

    fn len(&self) -> usize {
        self.scale.len()
    }

    fn slope(&self, seconds: f64, state: &[f64], slope: &mut [f64]) -> Instant {
        if self.is_plain() {
            self.slope_with(seconds, state, &self.hot::<1>(state), slope)
        } else {
            self.slope_with(seconds, state, &self.hot::<MOST_BODIES>(state), slope)
        }
    }

    fn scale(&self) -> &[f64] {
        &self.scale
    }
}

impl Circuit {
    fn slope_with<const N: usize>(
        &self,
        seconds: f64,
        state: &[f64],
        hot: &Hot<N>,
        slope: &mut [f64],
    ) -> Instant {
        let instant = self.instant_with(seconds, state, hot);
        let square = instant.amps * instant.amps;
        for (group, ohms) in self.groups.iter().zip(&hot.group_ohms) {
            for &(at, _) in &group.members {
                let heat = &hot.heats[at];
                // I^2 Rg^2 / R: the group's voltage on this lamp.
                slope[at] = (square * ohms * ohms / heat.ohms - heat.lost_watts) / heat.joules_per_kelvin;
            }
        }
        let here = At { seconds, state, modes: &self.modes };
        for branch in &self.branches {
            branch.slopes(instant.volts, here, slope);
        }
        instant
    }
}
