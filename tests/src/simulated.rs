//! Made-up benches: a true condition, true lamps, a true supply, and meters with errors.
//!
//! What differs from bench to bench has the spreads that the core states ([`lampladder_core::diagnosis::spread`]), but
//! is drawn at random from a recorded start, built through the public constructors and solved by the full solver.

use lampladder_core::bank::Bank;
use lampladder_core::condition::Condition;
use lampladder_core::detail::Detail;
use lampladder_core::diagnosis::{self, Ending, MODEL_DEVIATIONS, spread};
use lampladder_core::family::Family;
use lampladder_core::glow::Glow;
use lampladder_core::lamp::{Lamp, LampSpec};
use lampladder_core::load::Mode;
use lampladder_core::plate::{Plate, PlateSpec};
use lampladder_core::readings::{
    Behaviour, Kind, Look, Meter, MeterSpec, Reading, Readings, Response, Taking,
};
use lampladder_core::setup::Setup;
use lampladder_core::steady::{self, Equilibrium, Outcome};
use lampladder_core::supply::Supply;

/// Numbers that look random: S. Vigna's splitmix64 (public domain).
#[derive(Debug, Clone)]
pub struct Random(u64);

impl Random {
    /// From a recorded start.
    pub const fn new(start: u64) -> Self {
        Self(start)
    }

    fn bits(&mut self) -> u64 {
        self.0 = self.0.wrapping_add(0x9e37_79b9_7f4a_7c15);
        let mut z = self.0;
        z = (z ^ (z >> 30)).wrapping_mul(0xbf58_476d_1ce4_e5b9);
        z = (z ^ (z >> 27)).wrapping_mul(0x94d0_49bb_1331_11eb);
        z ^ (z >> 31)
    }

    /// Uniform in `0..1`.
    #[expect(clippy::cast_precision_loss, reason = "53 bits fit")]
    pub fn unit(&mut self) -> f64 {
        (self.bits() >> 11) as f64 / 9_007_199_254_740_992.0
    }

    /// Uniform between two numbers.
    pub fn between(&mut self, low: f64, high: f64) -> f64 {
        low + self.unit() * (high - low)
    }

    /// Standard normal (G. E. P. Box, M. E. Muller 1958).
    pub fn normal(&mut self) -> f64 {
        (-2.0 * (1.0 - self.unit()).ln()).sqrt() * (std::f64::consts::TAU * self.unit()).cos()
    }

    /// Whether an event of this probability happens.
    pub fn happens(&mut self, probability: f64) -> bool {
        self.unit() < probability
    }

    /// One of several, equally likely.
    ///
    /// # Panics
    /// Where there is none.
    #[expect(
        clippy::cast_possible_truncation,
        clippy::cast_sign_loss,
        clippy::cast_precision_loss,
        reason = "a place in a short list"
    )]
    pub fn one_of<'a, T>(&mut self, all: &'a [T]) -> &'a T {
        &all[(self.unit() * all.len() as f64) as usize]
    }

    /// A place, by weights that add to one.
    pub fn weighted(&mut self, weights: &[f64]) -> usize {
        let mut left = self.unit();
        for (place, weight) in weights.iter().enumerate() {
            left -= weight;
            if left < 0.0 {
                return place;
            }
        }
        weights.len() - 1
    }
}

/// What was entered: equipment of any family behind one or two lamps.
///
/// # Panics
/// Never: all of it is in range.
pub fn setup(random: &mut Random) -> Setup {
    let family = *random.one_of(&Family::ALL);
    let watts = match family {
        Family::UniversalMotor => random.between(150.0, 600.0),
        Family::Heater => random.between(30.0, 400.0),
        _ => random.between(15.0, 150.0),
    };
    let mut spec = PlateSpec { watts: Some(watts), ..PlateSpec::new(family, 230.0) };
    if family == Family::Measured {
        spec.details = vec![(Detail::MeasuredOhms, 230.0 * 230.0 / watts)];
    }
    let lamp = |watts: f64| Lamp::new(230.0, watts).expect("a stock size");
    let watts = *random.one_of(&[25.0, 40.0, 60.0, 100.0, 150.0]);
    let groups = match random.weighted(&[0.7, 0.2, 0.1]) {
        0 => vec![vec![lamp(watts)]],
        1 => vec![vec![lamp(watts), lamp(watts)]],
        _ => vec![vec![lamp(watts)], vec![lamp(watts)]],
    };
    Setup {
        supply: Supply::new(230.0, 50.0, 0.0).expect("a mains"),
        bank: Bank::new(groups).expect("one or two lamps"),
        plate: Plate::from_spec(spec).expect("a common plate"),
    }
}

/// A bench as it truly is.
#[derive(Debug, Clone)]
pub struct Truth {
    /// What is the matter.
    pub condition: Condition,
    /// The supply.
    pub supply: Supply,
    /// The lamps.
    pub bank: Bank,
    /// Where it settles; `None` where it pulses.
    pub settled: Option<Equilibrium>,
    /// What the lamp does over time.
    pub behaviour: Behaviour,
}

/// A true bench for what was entered; `None` where its lamp would burn out.
pub fn truth(setup: &Setup, random: &mut Random) -> Option<Truth> {
    let family = setup.plate.family();
    let condition = family.conditions()[random.weighted(&diagnosis::prior(family))];
    let volts = 230.0 * (1.0 + spread::SUPPLY_SPREAD * random.normal());
    let supply = Supply::new(volts, 50.0, 0.0).ok()?;
    let bank = bank(&setup.bank, random);
    let plate = &setup.plate;
    let share = random.between(family.healthy_shares().0, family.healthy_shares().1);
    let (least, most) = spread::severity(condition);
    let severity = least * (most / least).powf(random.unit());
    let motor = matches!(family, Family::UniversalMotor | Family::InductionMotor);
    let fixed = matches!(
        condition,
        Condition::Working | Condition::Overloaded | Condition::Stalled | Condition::ShortedWinding
    );
    let (watts, share) = if motor && fixed {
        (plate.watts() * random.between(spread::MOTOR_WATTS.0, spread::MOTOR_WATTS.1), 1.0)
    } else {
        (plate.watts(), share * severity)
    };
    let mut details = plate.spec().details.clone();
    let thresholds = random.normal();
    for default in family.details() {
        let factor = match default.detail {
            Detail::StartVolts | Detail::StopVolts => (spread::THRESHOLD_SPREAD * thresholds).exp(),
            Detail::MeasuredOhms => continue,
            _ => (spread::DETAIL_SPREAD * random.normal()).exp(),
        };
        details.push((default.detail, (factor * default.value).clamp(default.low, default.high)));
    }
    let spec = PlateSpec { watts: Some(watts), details, ..PlateSpec::new(family, plate.volts()) };
    let load = Plate::from_spec(spec).ok()?.load(condition, share).ok()?;
    let solved = steady::solve(&supply, &bank, &load).ok()?;
    let settled = solved.settled().cloned();
    let ending = match (&solved.outcome, &settled) {
        (Outcome::Hunts, _) | (_, None) => Ending::Hunts,
        (Outcome::DoesNotStart, _) => Ending::DoesNotStart,
        (_, Some(point)) => Ending::Settles(point.mode),
    };
    let weights = diagnosis::behaviours(family, condition, ending);
    let behaviour = Behaviour::ALL[random.weighted(&weights)];
    let settled = settled.filter(|point| ending != Ending::Hunts || point.mode == Mode::Off);
    Some(Truth { condition, supply, bank, settled, behaviour })
}

/// Real lamps for the printed ones, all of them off the same way.
fn bank(usual: &Bank, random: &mut Random) -> Bank {
    let (watts, kelvin, gas) = (random.normal(), random.normal(), random.normal());
    let tables = random.unit();
    let real = |lamp: &Lamp| {
        // The spreads of the core's defaults: 4 % + 0.5 W as limits, 80 K, 0.06 (0.03 in a vacuum).
        let limit = (0.04 * lamp.rated_watts() + 0.5) / 3.0_f64.sqrt();
        let share = if lamp.gas_share() > 0.0 { 0.06 } else { 0.03 };
        let real = Lamp::from_spec(LampSpec {
            volts: lamp.rated_volts(),
            watts: lamp.rated_watts() * (limit / lamp.rated_watts() * watts).exp(),
            rated_kelvin: Some(lamp.rated_kelvin() + 80.0 * kelvin),
            gas_share: Some((lamp.gas_share() + share * gas).clamp(0.0, 0.5)),
            ..LampSpec::default()
        })
        .expect("a lamp near a stock size");
        match tables {
            part if part < spread::OTHER_TABLES => real.variant(6),
            part if part < 2.0 * spread::OTHER_TABLES => real.variant(7),
            _ => real,
        }
    };
    let groups = usual.groups().iter().map(|group| group.iter().map(real).collect()).collect();
    Bank::new(groups).expect("as many lamps")
}

/// A meter of the cheap kind.
///
/// # Panics
/// Never: all of it is in range.
pub fn meter(random: &mut Random) -> Meter {
    let spec = MeterSpec {
        percent: *random.one_of(&[0.5, 1.0, 2.0]),
        digits: *random.one_of(&[2.0, 3.0, 5.0]),
        counts: *random.one_of(&[2000.0, 4000.0, 6000.0]),
        response: Response::TrueRms,
    };
    Meter::new(spec).expect("a common meter")
}

/// Everything that could be read on a bench, once: each number with its meter's errors, the supply's drift and a rounded
/// display. With `modelled`, what the steady model itself leaves out is on top.
#[derive(Debug, Clone)]
pub struct Panel {
    meter: Meter,
    taking: Taking,
    shown: [f64; Kind::ALL.len()],
    look: Look,
    behaviour: Behaviour,
}

impl Panel {
    /// Reads everything.
    pub fn new(truth: &Truth, meter: Meter, modelled: bool, random: &mut Random) -> Self {
        let taking = Taking::default();
        let volts = truth.supply.volts();
        let short = truth.bank.at_volts(volts);
        let mut pulsing = |most: f64| random.between(0.0, most);
        let (bank, load, amps, watts, kelvin) = match &truth.settled {
            Some(point) => (
                point.bank_volts,
                point.load_volts,
                point.amps,
                point.load_watts,
                point.lamps.iter().flatten().map(|lamp| lamp.kelvin).fold(300.0, f64::max),
            ),
            None => (
                pulsing(volts),
                pulsing(volts),
                pulsing(short.amps),
                pulsing(volts * short.amps / 4.0),
                300.0 + pulsing(short.hottest_kelvin - 300.0),
            ),
        };
        // The ohms are read on the bench of another test.
        let mut exact = [volts, bank, load, amps, watts, 0.0];
        if modelled {
            for (place, value) in exact.iter_mut().enumerate() {
                *value *= 1.0 + MODEL_DEVIATIONS[place] * random.normal();
            }
        }
        let mut gains: Vec<(f64, f64)> = Vec::new();
        let mut shown = [0.0; Kind::ALL.len()];
        for (place, kind) in Kind::ALL.into_iter().enumerate() {
            let drift = if place == 0 { 0.0 } else { taking.drift_percent / 100.0 * random.normal() };
            let value = exact[place] * (1.0 + drift);
            let step = meter.step(kind, value);
            let gain = meter.spec().percent / 100.0;
            let own = random.between(-gain, gain);
            let gain = match gains.iter().find(|known| known.0 == step) {
                Some(&(_, gain)) if place < 3 => gain,
                _ => own,
            };
            if place < 3 {
                gains.push((step, gain));
            }
            let digits = meter.spec().digits * step;
            let off = value * (1.0 + gain) + random.between(-digits, digits);
            shown[place] = ((off / step).round() * step).clamp(0.0, kind.most());
        }
        let seen = (kelvin * (1.0 + 0.07 * random.normal())).clamp(300.0, 3500.0);
        let rated = truth.bank.groups()[0][0].rated_kelvin();
        let look =
            if random.happens(0.5) { Look::Kelvin(seen) } else { Look::Word(Glow::at(seen, rated).word) };
        Self { meter, taking, shown, look, behaviour: truth.behaviour }
    }

    /// No reading yet.
    ///
    /// # Panics
    /// Never: the taking is the default one.
    pub fn nothing(&self) -> Readings {
        Readings::new(self.taking).expect("the default")
    }

    /// Reads a number.
    ///
    /// # Panics
    /// Never: what is shown is in range.
    pub fn reading(&self, kind: Kind) -> Reading {
        let place = Kind::ALL.iter().position(|known| *known == kind).expect("a kind");
        Reading::new(kind, self.shown[place], self.meter).expect("in range")
    }

    /// The look.
    pub const fn look(&self) -> Look {
        self.look
    }

    /// The behaviour.
    pub const fn behaviour(&self) -> Behaviour {
        self.behaviour
    }

    /// One to five things read, as people do.
    ///
    /// # Panics
    /// Never: what is shown is in range.
    pub fn some(&self, random: &mut Random) -> Readings {
        let mut readings = self.nothing();
        for (kind, often) in [
            (Kind::SupplyVolts, 0.4),
            (Kind::BankVolts, 0.7),
            (Kind::LoadVolts, 0.5),
            (Kind::Amps, 0.3),
            (Kind::LoadWatts, 0.2),
        ] {
            if random.happens(often) {
                readings.add(self.reading(kind));
            }
        }
        if random.happens(0.4) || readings.is_empty() {
            readings.set_look(Some(self.look)).expect("in range");
        }
        if random.happens(0.4) {
            readings.set_behaviour(Some(self.behaviour));
        }
        readings
    }
}
