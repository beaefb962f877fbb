//! From the numbers on the meters to everything that follows from them, and the causes that move those numbers.

use alloc::vec::Vec;

use super::coverage::{NORMAL, RECTANGULAR};
use super::waveform::{current_factor, load_volts_factor};
use super::{Kind, Readings, Response};
use crate::band::COVERAGE;
use crate::bank::Bank;
use crate::lamp::Lamp;

/// The bank, and the banks that it may really be: one a [`Lamp::variant`].
pub(super) struct Banks {
    usual: Bank,
    variants: Vec<Bank>,
}

impl Banks {
    pub(super) fn new(bank: &Bank) -> Self {
        Self { usual: bank.clone(), variants: (0..Lamp::VARIANTS).map(|index| bank.variant(index)).collect() }
    }

    fn get(&self, variant: Option<usize>) -> &Bank {
        variant.and_then(|index| self.variants.get(index)).unwrap_or(&self.usual)
    }
}

/// What the meters showed, moved by one cause; NaN where nothing was read.
#[derive(Debug, Clone, Copy)]
pub(super) struct Inputs {
    pub(super) shown: [f64; Kind::ALL.len()],
    pub(super) averaging: [bool; Kind::ALL.len()],
    /// Of the hottest filament, by eye.
    pub(super) kelvin: f64,
    pub(super) variant: Option<usize>,
    /// Half the conduction angle, for averaging meters.
    pub(super) half_angle: f64,
    /// Exponent of power against voltage.
    pub(super) growth: f64,
}

/// One independent cause: the inputs with it one standard uncertainty up and down.
pub(super) struct Cause {
    pub(super) kurtosis: f64,
    pub(super) ends: [Inputs; 2],
    /// Only the first end is known; the truth may lie as far on the other side, at 95 %.
    pub(super) mirrored: bool,
}

impl Inputs {
    pub(super) fn new(bank: &Bank, readings: &Readings, growth: (f64, f64)) -> Self {
        let mut shown = [f64::NAN; Kind::ALL.len()];
        let mut averaging = [false; Kind::ALL.len()];
        for reading in readings.numbers() {
            shown[reading.kind().index()] = reading.value();
            averaging[reading.kind().index()] = reading.meter().spec().response == Response::Averaging;
        }
        let (narrow, wide) = readings.taking().waveform.half_angles();
        Self {
            shown,
            averaging,
            kelvin: readings.look().map_or(f64::NAN, |look| look.kelvin(rated_kelvin(bank)).0),
            variant: None,
            half_angle: f64::midpoint(narrow, wide),
            growth: f64::midpoint(growth.0, growth.1),
        }
    }

    /// Every cause that moves them.
    pub(super) fn causes(&self, bank: &Bank, readings: &Readings, growth: (f64, f64)) -> Vec<Cause> {
        let mut causes = Vec::new();
        let mut add = |kurtosis, ends| causes.push(Cause { kurtosis, ends, mirrored: false });
        let moved = |kinds: &[Kind], by: &dyn Fn(f64) -> f64| {
            [1.0, -1.0].map(|sign| {
                let mut inputs = *self;
                for kind in kinds {
                    let shown = &mut inputs.shown[kind.index()];
                    *shown = (*shown + sign * by(*shown)).max(0.0);
                }
                inputs
            })
        };
        let root_3 = libm::sqrt(3.0);
        // Ranges of one meter whose gain has been moved already.
        let mut done: Vec<f64> = Vec::new();
        for reading in readings.numbers() {
            let kind = reading.kind();
            let (gain, digits) = reading.limits();
            let shares = readings.taking().one_meter && kind.is_volts();
            if !shares {
                add(RECTANGULAR, moved(&[kind], &|_| gain / root_3));
            } else if !done.contains(&reading.step()) {
                done.push(reading.step());
                let same = readings
                    .numbers()
                    .filter(|other| other.kind().is_volts() && other.step() == reading.step());
                let kinds: Vec<Kind> = same.map(super::Reading::kind).collect();
                let share = reading.meter().spec().percent / 100.0 / root_3;
                add(RECTANGULAR, moved(&kinds, &|shown| share * shown));
            }
            add(RECTANGULAR, moved(&[kind], &|_| digits / root_3));
            // The supply's reading is the one that the others have drifted from.
            if kind != Kind::SupplyVolts && kind != Kind::PlugOhms && readings.drift() > 0.0 {
                add(NORMAL, moved(&[kind], &|shown| readings.drift() * shown));
            }
        }
        if let Some(look) = readings.look() {
            let deviation = look.kelvin(rated_kelvin(bank)).1;
            add(NORMAL, [1.0, -1.0].map(|sign| Self { kelvin: self.kelvin + sign * deviation, ..*self }));
        }
        if self.averaging.contains(&true) {
            let (narrow, wide) = readings.taking().waveform.half_angles();
            let by = (wide - narrow) / libm::sqrt(12.0);
            add(
                RECTANGULAR,
                [1.0, -1.0].map(|sign| Self { half_angle: self.half_angle + sign * by, ..*self }),
            );
        }
        let by = (growth.1 - growth.0) / libm::sqrt(12.0);
        add(RECTANGULAR, [1.0, -1.0].map(|sign| Self { growth: self.growth + sign * by, ..*self }));
        for pair in 0..3 {
            add(NORMAL, [2 * pair, 2 * pair + 1].map(|index| Self { variant: Some(index), ..*self }));
        }
        for other_table in 6..Lamp::VARIANTS {
            let end = Self { variant: Some(other_table), ..*self };
            causes.push(Cause { kurtosis: NORMAL, ends: [end; 2], mirrored: true });
        }
        causes
    }
}

/// Rated temperature of the lamp that is looked at.
fn rated_kelvin(bank: &Bank) -> f64 {
    bank.groups()[0][0].rated_kelvin()
}

/// How much each of several ways to the same quantity counts; they add to one.
#[derive(Debug, Clone, Copy, Default)]
pub(super) struct Weights {
    /// By the lamps, by the meter, by the glow.
    pub(super) amps: [f64; 3],
    /// By three voltages, by the meter.
    pub(super) watts: [f64; 2],
}

/// Everything that follows; NaN where it does not.
#[derive(Debug, Clone, Copy)]
pub(super) struct Values(pub(super) [f64; 20]);

/// Places in [`Values`].
#[derive(Debug, Clone, Copy)]
pub(super) enum Place {
    LampAmps,
    MeterAmps,
    GlowAmps,
    ThreeWatts,
    MeterWatts,
    SupplyVolts,
    BankVolts,
    LoadVolts,
    Amps,
    Watts,
    PowerFactor,
    LoadOhms,
    FullAmps,
    FullWatts,
    PlugOhms,
    /// How far each rule of the circuit is broken: positive is broken.
    FallsShort,
    DiffersByMore,
    PowerBack,
    AmpsApart,
    WattsApart,
}

impl Values {
    pub(super) const fn get(&self, place: Place) -> f64 {
        self.0[place as usize]
    }

    pub(super) fn at(inputs: &Inputs, banks: &Banks, weights: &Weights) -> Self {
        let shown = |kind: Kind| {
            let value = inputs.shown[kind.index()];
            match kind {
                _ if !inputs.averaging[kind.index()] => value,
                Kind::BankVolts | Kind::Amps => value * current_factor(inputs.half_angle),
                Kind::LoadVolts => value * load_volts_factor(inputs.half_angle),
                _ => value,
            }
        };
        let bank = banks.get(inputs.variant);
        let supply_volts = shown(Kind::SupplyVolts);
        let bank_volts = shown(Kind::BankVolts);
        let lamp_amps = if bank_volts.is_nan() { f64::NAN } else { bank.at_volts(bank_volts).amps };
        let meter_amps = shown(Kind::Amps);
        let glow_amps =
            if inputs.kelvin.is_nan() { f64::NAN } else { bank.at_hottest_kelvin(inputs.kelvin).amps };
        let amps = mixed(&[lamp_amps, meter_amps, glow_amps], &weights.amps);
        let bank_volts =
            if bank_volts.is_nan() && !amps.is_nan() { bank.at_amps(amps).volts } else { bank_volts };
        let bank_ohms = if amps > 0.0 && bank_volts > 0.0 { bank_volts / amps } else { bank.cold_ohms() };
        let load_volts = shown(Kind::LoadVolts);
        let missing = supply_volts * supply_volts - bank_volts * bank_volts;
        let three_watts = (missing - load_volts * load_volts) / (2.0 * bank_ohms);
        let meter_watts = shown(Kind::LoadWatts);
        let watts = mixed(&[three_watts, meter_watts], &weights.watts);
        // With power read instead of the equipment's volts, the same triangle gives those.
        let load_volts = if load_volts.is_nan() {
            let square = missing - 2.0 * bank_ohms * meter_watts;
            if square.is_nan() { f64::NAN } else { libm::sqrt(square.max(0.0)) }
        } else {
            load_volts
        };
        let ratio = supply_volts / load_volts;
        let full_watts = watts * libm::pow(ratio, inputs.growth);
        let power_factor = watts / (load_volts * amps);
        let known = |value: f64| if value.is_finite() { value } else { f64::NAN };
        let mut all = [f64::NAN; 20];
        for (place, value) in [
            (Place::LampAmps, lamp_amps),
            (Place::MeterAmps, meter_amps),
            (Place::GlowAmps, glow_amps),
            (Place::ThreeWatts, three_watts),
            (Place::MeterWatts, meter_watts),
            (Place::SupplyVolts, supply_volts),
            (Place::BankVolts, bank_volts),
            (Place::LoadVolts, load_volts),
            (Place::Amps, amps),
            (Place::Watts, watts),
            (Place::PowerFactor, power_factor),
            (Place::LoadOhms, load_volts / amps),
            (Place::FullAmps, amps * libm::pow(ratio, inputs.growth - 1.0)),
            (Place::FullWatts, full_watts),
            (Place::PlugOhms, shown(Kind::PlugOhms)),
            (Place::FallsShort, supply_volts - bank_volts - load_volts),
            (Place::DiffersByMore, libm::fabs(bank_volts - load_volts) - supply_volts),
            (Place::PowerBack, libm::hypot(bank_volts, load_volts) - supply_volts),
            (Place::AmpsApart, meter_amps - lamp_amps),
            (Place::WattsApart, meter_watts - three_watts),
        ] {
            all[place as usize] = known(value);
        }
        Self(all)
    }

    /// Where a mirrored cause would put the values on either side.
    pub(super) fn mirrored(&self, around: &Self) -> [Self; 2] {
        [1.0, -1.0].map(|sign| {
            let mut all = *around;
            for (value, end) in all.0.iter_mut().zip(&self.0) {
                *value += sign * (end - *value) / COVERAGE;
            }
            all
        })
    }
}

/// The weighted mean of those that exist.
fn mixed(values: &[f64], weights: &[f64]) -> f64 {
    let known = values.iter().zip(weights).filter(|(value, weight)| !value.is_nan() && **weight > 0.0);
    let (sum, total) =
        known.fold((0.0, 0.0), |(sum, total), (value, weight)| (sum + value * weight, total + weight));
    if total > 0.0 { sum / total } else { f64::NAN }
}
