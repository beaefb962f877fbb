//! A bank being searched: every filament starts from where it stood at the step before.
//!
//! At a point of the chain each parallel group either has the voltage of the leading filament, or the current of the
//! first group. Newton's method on all filaments of a group at once, in the logarithm of their rise, where curves are
//! nearly straight: two or three evaluations of each along a search, since neighbouring points move all rises alike.

use alloc::vec::Vec;
use core::cell::Cell;

use super::{Bank, BankPoint};
use crate::filament::{Filament, FilamentPoint};
use crate::lamp::{Lamp, LampState};
use crate::tungsten::AMBIENT_KELVIN;

/// Equal filaments side by side.
#[derive(Debug, Clone, PartialEq)]
struct Kind {
    filament: Filament,
    count: f64,
}

/// What all search of a bank needs of it: each distinct parallel group once.
#[derive(Debug, Clone, PartialEq)]
pub(super) struct Chain {
    groups: Vec<Group>,
    /// For every lamp, group by group, which kind it is, all kinds being numbered in order.
    places: Vec<Vec<usize>>,
}

/// A parallel group, as often as it occurs in the chain.
#[derive(Debug, Clone, PartialEq)]
struct Group {
    kinds: Vec<Kind>,
    times: f64,
}

impl Chain {
    pub(super) fn of(lamps: &[Vec<Lamp>]) -> Self {
        let mut groups: Vec<Group> = Vec::new();
        let mut firsts: Vec<usize> = Vec::new();
        let mut places = Vec::new();
        for lamps in lamps {
            let mut kinds: Vec<Kind> = Vec::new();
            let mut inside = Vec::new();
            for lamp in lamps {
                let known = kinds.iter().position(|kind| kind.filament == *lamp.filament());
                if let Some(known) = known {
                    kinds[known].count += 1.0;
                } else {
                    kinds.push(Kind { filament: lamp.filament().clone(), count: 1.0 });
                }
                inside.push(known.unwrap_or(kinds.len() - 1));
            }
            let known = groups.iter().position(|group| group.kinds == kinds);
            if let Some(known) = known {
                groups[known].times += 1.0;
            } else {
                firsts.push(groups.iter().map(|group| group.kinds.len()).sum());
                groups.push(Group { kinds, times: 1.0 });
            }
            let first = firsts[known.unwrap_or(groups.len() - 1)];
            places.push(inside.iter().map(|index| first + index).collect());
        }
        Self { groups, places }
    }

    fn kinds(&self) -> impl Iterator<Item = &Kind> {
        self.groups.iter().flat_map(|group| &group.kinds)
    }
}

/// What a group is brought to.
#[derive(Clone, Copy)]
enum Goal {
    LnVolts(f64),
    Amps(f64),
}

/// Where the filaments of one kind stand.
#[derive(Debug, Clone, Copy, Default)]
struct Place {
    /// Logarithm of the rise.
    ln_rise: f64,
    /// Logarithm of their volts, and its slope against that of the rise, one step before.
    ln_volts: f64,
    volts_slope: f64,
    /// By how much they move for a small move of the leading filament.
    pace: f64,
}

/// Where a group stands.
#[derive(Clone, Copy)]
struct Stand {
    volts: f64,
    amps: f64,
    /// Amperes that one more in ln volts brings.
    gain: f64,
}

/// A point of the walk, and how steep the curve is there.
#[derive(Debug, Clone, Copy)]
pub(crate) struct Step {
    pub(crate) point: BankPoint,
    /// Slope of ln volts against the logarithm of the leading filament's rise.
    pub(crate) volts_slope: f64,
    /// Slope of ln amperes against it.
    pub(crate) amps_slope: f64,
}

impl Group {
    /// Brings the filaments to the goal, and leaves them there.
    fn settle(kinds: &[Kind], goal: Goal, places: &mut [Place]) -> Stand {
        let (low, high) = Filament::ln_rise_span();
        let mut steps = 0;
        loop {
            // sum of I (1 + g (v - v_k)) = amps, with v_k = ln volts of filament k and g = d ln I / d ln V.
            let (mut total, mut gain, mut weighted) = (0.0, 0.0, 0.0);
            // No further than filaments can step, so that an absurd goal stays a number.
            let mut reach = f64::NEG_INFINITY;
            for (kind, place) in kinds.iter().zip(places.iter_mut()) {
                let point = kind.filament.at_ln_rise(place.ln_rise);
                place.ln_volts = 0.5 * libm::log(point.watts * point.ohms);
                place.volts_slope = point.volts_slope();
                let amps = kind.count * point.amps();
                let share = amps * point.amps_slope() / place.volts_slope;
                total += amps;
                gain += share;
                weighted += share * place.ln_volts;
                reach = f64::max(reach, place.ln_volts + LONGEST_STEP * place.volts_slope);
            }
            let ln_volts = match goal {
                Goal::LnVolts(ln_volts) => ln_volts,
                Goal::Amps(amps) => ((amps - total + weighted) / gain).min(reach),
            };
            let mut largest: f64 = 0.0;
            for place in places.iter_mut().take(kinds.len()) {
                let step =
                    ((ln_volts - place.ln_volts) / place.volts_slope).clamp(-LONGEST_STEP, LONGEST_STEP);
                let moved = (place.ln_rise + step).clamp(low, high);
                largest = largest.max((moved - place.ln_rise).abs());
                place.ln_rise = moved;
            }
            steps += 1;
            if largest < CONVERGED || steps == MOST_STEPS {
                // What the last step changed, to first order: its square is below the last digits.
                let amps = total + gain * ln_volts - weighted;
                return Stand { volts: libm::exp(ln_volts), amps, gain };
            }
        }
    }
}

/// More steps than crossing the whole span of temperature by clamped ones takes.
const MOST_STEPS: usize = 60;

/// Longest Newton step in the logarithm of the rise.
const LONGEST_STEP: f64 = 3.0;

/// A Newton step this small leaves an error of about its square.
const CONVERGED: f64 = 3e-7;

/// A bank on the way through its curve.
#[derive(Debug, Clone)]
pub(crate) struct Walk<'a> {
    bank: &'a Bank,
    /// Of every kind, the leading filament first.
    places: Cell<[Place; Bank::MOST_LAMPS]>,
}

impl<'a> Walk<'a> {
    /// Sets out with every filament at its rating.
    pub(crate) fn new(bank: &'a Bank) -> Self {
        let mut places = [Place::default(); Bank::MOST_LAMPS];
        for (place, kind) in places.iter_mut().zip(bank.chain.kinds()) {
            place.ln_rise = libm::log(kind.filament.shape().kelvin - AMBIENT_KELVIN);
            place.pace = 1.0;
        }
        Self { bank, places: Cell::new(places) }
    }

    /// To where the leading filament is at a logarithm of the rise above ambient. Volts and amperes both grow with it,
    /// so it is the one variable in which to search. A bank of equal lamps costs one evaluation.
    pub(crate) fn to(&self, ln_rise: f64) -> BankPoint {
        self.step_to(ln_rise).point
    }

    /// The same, with the slopes there.
    pub(crate) fn step_to(&self, ln_rise: f64) -> Step {
        let (low, high) = Filament::ln_rise_span();
        let mut places = self.places.get();
        let moved = ln_rise - places[0].ln_rise;
        for place in &mut places {
            place.ln_rise = (place.ln_rise + place.pace * moved).clamp(low, high);
        }
        places[0].ln_rise = ln_rise;
        let groups = &self.bank.chain.groups;
        let first = &groups[0];
        let lead: FilamentPoint = first.kinds[0].filament.at_ln_rise(ln_rise);
        let mut amps = first.kinds[0].count * lead.amps();
        // d I / d ln rise of the first group, all of whose filaments have the lead's volts.
        let mut growth = amps * lead.amps_slope();
        let (own, others) = places.split_at_mut(first.kinds.len());
        if first.kinds.len() > 1 {
            let ln_volts = 0.5 * libm::log(lead.watts * lead.ohms);
            let beside = Group::settle(&first.kinds[1..], Goal::LnVolts(ln_volts), &mut own[1..]);
            amps += beside.amps;
            growth += beside.gain * lead.volts_slope();
            for place in &mut own[1..] {
                place.pace = lead.volts_slope() / place.volts_slope;
            }
        }
        let amps_slope = growth / amps;
        let first_volts = first.times * lead.volts();
        let (other_volts, other_growth) = settle_chain(&groups[1..], amps, amps_slope, others);
        let volts = first_volts + other_volts;
        let volts_slope = (first_volts * lead.volts_slope() + other_growth) / volts;
        Step { point: self.arrive(volts, amps, places), volts_slope, amps_slope }
    }

    /// To a current through the chain, amperes, above 0.
    pub(crate) fn to_amps(&self, amps: f64) -> BankPoint {
        let mut places = self.places.get();
        let (volts, _) = settle_chain(&self.bank.chain.groups, amps, 1.0, &mut places);
        self.arrive(volts, amps, places)
    }

    fn arrive(&self, volts: f64, amps: f64, places: [Place; Bank::MOST_LAMPS]) -> BankPoint {
        self.places.set(places);
        let rises = self.bank.chain.kinds().zip(&places).map(|(_, place)| place.ln_rise);
        let hottest = libm::exp(rises.fold(f64::NEG_INFINITY, f64::max).min(Filament::ln_rise_span().1));
        BankPoint { volts, amps, hottest_kelvin: AMBIENT_KELVIN + hottest }
    }

    /// The logarithm of the leading filament's rise here.
    pub(crate) fn lead_ln_rise(&self) -> f64 {
        self.places.get()[0].ln_rise
    }

    /// Every lamp's state here, in the order of the bank.
    pub(crate) fn lamps(&self) -> Vec<Vec<LampState>> {
        let places = self.places.get();
        let mut states = [None; Bank::MOST_LAMPS];
        for ((state, kind), place) in states.iter_mut().zip(self.bank.chain.kinds()).zip(places) {
            *state = Some(LampState::from(&kind.filament.at_ln_rise(place.ln_rise)));
        }
        let kinds = self.bank.chain.places.iter();
        kinds.map(|group| group.iter().filter_map(|&kind| states[kind]).collect()).collect()
    }
}

/// Brings groups in series to a current, where a small move of the lead changes ln amperes by `amps_slope` of it; their
/// volts together, and how many more volts that move brings.
fn settle_chain(groups: &[Group], amps: f64, amps_slope: f64, places: &mut [Place]) -> (f64, f64) {
    let mut rest = places;
    let (mut volts, mut growth) = (0.0, 0.0);
    for group in groups {
        let (own, others) = rest.split_at_mut(group.kinds.len());
        let stand = Group::settle(&group.kinds, Goal::Amps(amps), own);
        let ln_volts_growth = amps_slope * amps / stand.gain;
        volts += group.times * stand.volts;
        growth += group.times * stand.volts * ln_volts_growth;
        for place in own {
            place.pace = ln_volts_growth / place.volts_slope;
        }
        rest = others;
    }
    (volts, growth)
}
