//! What a set of readings says, or why it cannot be one set.

use alloc::vec::Vec;

use super::contradiction::{Contradiction, MOST_DEVIATIONS, Refused, Rule};
use super::coverage::{Estimate, Gathered};
use super::inputs::{Banks, Inputs, Place, Values, Weights};
use super::{Kind, Readings};
use crate::bank::Bank;

/// Everything that a set of readings says, each with its uncertainty; `None` for what cannot be known from them.
#[derive(Debug, Clone, Default, PartialEq)]
#[non_exhaustive]
pub struct Found {
    /// Volts of the supply, as read.
    pub supply_volts: Option<Estimate>,
    /// Volts across the bank, as read or from the current.
    pub bank_volts: Option<Estimate>,
    /// Volts across the equipment, as read or from supply, bank and power.
    pub load_volts: Option<Estimate>,
    /// Current in the loop, amperes: by the lamps, the meter and the glow together.
    pub amps: Option<Estimate>,
    /// Real power into the equipment, watts: by three voltages and by the meter together.
    pub load_watts: Option<Estimate>,
    /// Power factor of the equipment, 0 to 1.
    pub load_power_factor: Option<Estimate>,
    /// Volts over amperes of the equipment, ohms.
    pub load_ohms: Option<Estimate>,
    /// What the equipment would take at the full supply voltage if it goes on as it is, amperes.
    pub full_amps: Option<Estimate>,
    /// The same, watts.
    pub full_watts: Option<Estimate>,
    /// Ohms across the plug, as read.
    pub plug_ohms: Option<Estimate>,
}

/// Least share of the supply across the equipment from which the draw at full supply is extrapolated: below, it stands
/// at a fraction of its voltage that says nothing about the rest (design value).
const LEAST_SHARE: f64 = 0.1;

/// What `readings` say, taken behind `bank`; `growth` is the least and greatest exponent of the equipment's power against
/// voltage ([`super::growth`]), for the draw at full supply.
///
/// # Errors
/// [`Refused`] where they cannot belong together: a law of the circuit is broken by more than three standard
/// uncertainties. The arithmetic is in the answer.
pub fn interpret(bank: &Bank, readings: &Readings, growth: (f64, f64)) -> Result<Found, Refused> {
    let banks = Banks::new(bank);
    let inputs = Inputs::new(bank, readings, growth);
    let causes = inputs.causes(bank, readings, growth);
    let gather = |weights: &Weights| {
        let values = Values::at(&inputs, &banks, weights);
        let mut gathered = values.0.map(Gathered::around);
        for cause in &causes {
            let first = Values::at(&cause.ends[0], &banks, weights);
            let ends = if cause.mirrored {
                first.mirrored(&values)
            } else {
                [first, Values::at(&cause.ends[1], &banks, weights)]
            };
            for (index, one) in gathered.iter_mut().enumerate() {
                one.cause(cause.kurtosis, [ends[0].0[index], ends[1].0[index]]);
            }
        }
        Gathering { values, gathered }
    };
    // Each way alone first; then together, by inverse variance.
    let alone = gather(&Weights { amps: [1.0; 3], watts: [1.0; 2] });
    let mut weights = Weights {
        amps: [Place::LampAmps, Place::MeterAmps, Place::GlowAmps].map(|place| alone.inverse_variance(place)),
        watts: [0.0; 2],
    };
    let with_amps = gather(&Weights { watts: [1.0; 2], ..weights });
    weights.watts = [Place::ThreeWatts, Place::MeterWatts].map(|place| with_amps.inverse_variance(place));
    let all = gather(&weights);
    let contradictions = contradictions(bank, readings, &all);
    if contradictions.is_empty() { Ok(all.found()) } else { Err(Refused { contradictions }) }
}

struct Gathering {
    values: Values,
    gathered: [Gathered; 20],
}

impl Gathering {
    fn value(&self, place: Place) -> f64 {
        self.values.get(place)
    }

    fn deviation(&self, place: Place) -> f64 {
        self.gathered[place as usize].deviation()
    }

    fn inverse_variance(&self, place: Place) -> f64 {
        let deviation = self.deviation(place);
        if self.value(place).is_nan() { 0.0 } else { 1.0 / (deviation * deviation).max(1e-24) }
    }

    fn estimate(&self, place: Place) -> Option<Estimate> {
        (!self.value(place).is_nan()).then(|| self.gathered[place as usize].estimate())
    }

    fn found(&self) -> Found {
        let positive = |place| self.estimate(place).map(|estimate| estimate.inside(0.0, f64::MAX));
        let amps = positive(Place::Amps);
        let load_volts = positive(Place::LoadVolts);
        // Power may not exceed volts times amperes, at best and at the end of the band.
        let most_watts = |end: fn(&Estimate) -> f64| match (&amps, &load_volts) {
            (Some(amps), Some(volts)) => end(amps) * end(volts),
            _ => f64::MAX,
        };
        let best = most_watts(|estimate| estimate.band.value);
        let load_watts = positive(Place::Watts).map(|mut estimate| {
            estimate = estimate.inside(0.0, most_watts(|estimate| estimate.band.high));
            estimate.band.value = estimate.band.value.min(best);
            estimate
        });
        let flows = amps.is_some_and(|amps| amps.band.value > 0.0);
        let near = self.value(Place::LoadVolts) >= LEAST_SHARE * self.value(Place::SupplyVolts);
        Found {
            supply_volts: positive(Place::SupplyVolts),
            bank_volts: positive(Place::BankVolts),
            load_volts,
            amps,
            load_watts,
            load_power_factor: self
                .estimate(Place::PowerFactor)
                .filter(|_| flows)
                .map(|estimate| estimate.inside(0.0, 1.0)),
            load_ohms: positive(Place::LoadOhms).filter(|_| flows),
            full_amps: positive(Place::FullAmps).filter(|_| near),
            full_watts: positive(Place::FullWatts).filter(|_| near),
            plug_ohms: positive(Place::PlugOhms),
        }
    }
}

fn contradictions(bank: &Bank, readings: &Readings, all: &Gathering) -> Vec<Contradiction> {
    let read = |kind: Kind| readings.get(kind).map(super::Reading::value);
    let value = |place| all.value(place);
    let (supply, amps) = (value(Place::SupplyVolts), value(Place::Amps));
    let mut found = Vec::new();
    if let Some(volts) = read(Kind::BankVolts) {
        let most = bank.at_volts(volts).volts;
        // The curve ends where the filament melts; the search itself is far closer than this.
        found.extend(Contradiction::check(
            Rule::FilamentHolds,
            volts,
            most,
            volts - most * (1.0 + 1e-6),
            0.0,
        ));
    }
    let three = [Kind::SupplyVolts, Kind::BankVolts, Kind::LoadVolts].map(read);
    if let [Some(_), Some(bank_volts), Some(load_volts)] = three {
        let differs = value(Place::DiffersByMore);
        let apart = all.deviation(Place::DiffersByMore);
        let by_whole = Contradiction::check(
            Rule::PartsDifferByWhole,
            libm::fabs(bank_volts - load_volts),
            supply,
            differs,
            apart,
        );
        let back = value(Place::PowerBack);
        let comes_back = Contradiction::check(
            Rule::NoPowerComesBack,
            back + supply,
            supply,
            back,
            all.deviation(Place::PowerBack),
        );
        found.extend(by_whole.or(comes_back));
        let short = value(Place::FallsShort);
        found.extend(Contradiction::check(
            Rule::PartsReachWhole,
            supply - short,
            supply,
            short,
            all.deviation(Place::FallsShort),
        ));
    } else {
        for place in [Place::BankVolts, Place::LoadVolts] {
            let deviation = libm::hypot(all.deviation(place), all.deviation(Place::SupplyVolts));
            let part = value(place);
            found.extend(Contradiction::check(Rule::PartWithinWhole, part, supply, part - supply, deviation));
        }
    }
    let meter = value(Place::MeterAmps);
    let lamps = value(Place::LampAmps);
    found.extend(Contradiction::check(
        Rule::CurrentsAgree,
        meter,
        lamps,
        libm::fabs(value(Place::AmpsApart)),
        all.deviation(Place::AmpsApart),
    ));
    let (measured, by) = if lamps.is_nan() { (meter, Place::MeterAmps) } else { (lamps, Place::LampAmps) };
    if let Some(look) = readings.look() {
        // A word is a range, so far from a normal distribution that its ends count, not its deviation.
        let rated_kelvin = bank.groups()[0][0].rated_kelvin();
        let [least, most] =
            look.ends(rated_kelvin, MOST_DEVIATIONS).map(|end| bank.at_hottest_kelvin(end).amps);
        let gap = (measured - most).max(least - measured);
        let right = value(Place::GlowAmps);
        found.extend(Contradiction::check(Rule::GlowAgrees, measured, right, gap, all.deviation(by)));
    }
    let watts = value(Place::MeterWatts);
    let three_watts = value(Place::ThreeWatts);
    found.extend(Contradiction::check(
        Rule::PowersAgree,
        watts,
        three_watts,
        libm::fabs(value(Place::WattsApart)),
        all.deviation(Place::WattsApart),
    ));
    if read(Kind::LoadVolts).is_some() {
        let apparent = value(Place::LoadVolts) * amps;
        let relative = libm::hypot(
            all.deviation(Place::LoadVolts) / value(Place::LoadVolts),
            all.deviation(Place::Amps) / amps,
        );
        let deviation = libm::hypot(all.deviation(Place::MeterWatts), apparent * relative);
        found.extend(Contradiction::check(
            Rule::RealWithinApparent,
            watts,
            apparent,
            watts - apparent,
            deviation,
        ));
    }
    found
}
