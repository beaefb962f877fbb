//! Every reading that every condition would give, over the spread of benches.

use alloc::vec::Vec;

use super::behaviour::behaviours;
use super::plug::plug_ohms;
use super::scale::{LOOK, MODEL, QUANTITIES, scaled};
use super::sobol::Sobol;
use super::spread::{Draw, SUPPLY_SPREAD};
use crate::bank::Bank;
use crate::condition::Condition;
use crate::family::Family;
use crate::load::{Load, Mode};
use crate::plate::Plate;
use crate::readings::{
    HALF_WAVE_FACTOR, Kind, Reading, Response, current_factor, half_wave_load_factor, load_volts_factor,
};
use crate::setup::Setup;
use crate::steady::{self, Sketch, Sketched, SteadyError, Warm};
use crate::supply::Supply;
use crate::tungsten::AMBIENT_KELVIN;

/// What becomes of the circuit.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash)]
#[non_exhaustive]
pub enum Ending {
    /// It comes to rest, in one of the ways in which the equipment can work.
    Settles(Mode),
    /// It starts, stops and starts again.
    Hunts,
    /// It is on and never starts.
    DoesNotStart,
}

/// Benches of one condition that end the same way.
#[derive(Debug, Clone)]
pub(crate) struct Cluster {
    pub(crate) condition: usize,
    pub(crate) behaviours: [f64; 4],
    /// On the scales of [`super::scale`].
    pub(crate) members: Vec<[f64; QUANTITIES]>,
    /// Standard deviations on those scales of the model and of what it leaves open.
    pub(crate) open: [f64; QUANTITIES],
    pub(crate) mean: [f64; QUANTITIES],
    /// Sums of products of differences from the mean; the lower triangle.
    moments: [[f64; QUANTITIES]; QUANTITIES],
    ending: Ending,
}

/// The conditions of the equipment, each as the readings that it would give over the spread of supplies, lamps, plates
/// and severities. It depends on the bench and on the supply's reading, not on the other readings: prepare it once, in
/// slices if need be, then ask it after every keystroke.
#[derive(Debug, Clone)]
pub struct Forecast {
    setup: Setup,
    supply_volts: f64,
    supply_deviation: f64,
    averaging: bool,
    sobol: Sobol,
    done: u32,
    /// Benches of each condition that had an answer.
    counts: Vec<u32>,
    warm: Vec<Warm>,
    clusters: Vec<Cluster>,
    pub(crate) supply_is_read: bool,
}

impl Forecast {
    /// Benches a condition that a forecast holds.
    pub const BENCHES: u32 = 256;

    /// Prepares for a bench: `supply` is the reading of the supply, where there is one; `averaging` whether the other
    /// volts and amperes are read by an averaging meter. Nothing is solved yet: see [`Self::advance`].
    ///
    /// # Errors
    /// Equipment that has no meaning on this supply.
    pub fn new(setup: &Setup, supply: Option<&Reading>, response: Response) -> Result<Self, SteadyError> {
        for &condition in setup.plate.family().conditions() {
            setup.plate.load(condition, 1.0)?.check(&setup.supply)?;
        }
        let usual = setup.supply.volts();
        let (supply_volts, supply_deviation) =
            supply.map_or((usual, SUPPLY_SPREAD * usual), |reading| (reading.value(), reading.deviation()));
        let conditions = setup.plate.family().conditions().len();
        Ok(Self {
            setup: setup.clone(),
            supply_volts,
            supply_deviation,
            averaging: response == Response::Averaging,
            sobol: Sobol::new(),
            done: 0,
            counts: alloc::vec![0; conditions],
            warm: alloc::vec![Warm::default(); conditions],
            clusters: Vec::new(),
            supply_is_read: supply.is_some(),
        })
    }

    /// Prepares and solves all of it.
    ///
    /// # Errors
    /// As [`Self::new`].
    pub fn complete(
        setup: &Setup,
        supply: Option<&Reading>,
        response: Response,
    ) -> Result<Self, SteadyError> {
        let mut forecast = Self::new(setup, supply, response)?;
        forecast.advance(u32::MAX);
        Ok(forecast)
    }

    /// Solves up to `benches` more benches, every condition of each; whether all are done. A diagnosis from a forecast
    /// that is not done is coarser.
    pub fn advance(&mut self, benches: u32) -> bool {
        let end = self.done.saturating_add(benches).min(Self::BENCHES);
        while self.done < end {
            self.solve_bench(self.done);
            self.done += 1;
        }
        self.is_complete()
    }

    /// Whether every bench is solved.
    pub const fn is_complete(&self) -> bool {
        self.done >= Self::BENCHES
    }

    /// The bench that it is for.
    pub const fn setup(&self) -> &Setup {
        &self.setup
    }

    /// The conditions, in the family's order.
    pub fn conditions(&self) -> &'static [Condition] {
        self.setup.plate.family().conditions()
    }

    pub(crate) fn clusters(&self) -> &[Cluster] {
        &self.clusters
    }

    /// Part of a condition's benches that a cluster holds.
    pub(crate) fn share(&self, cluster: &Cluster) -> f64 {
        #[expect(clippy::cast_precision_loss, reason = "at most 256 benches")]
        let members = cluster.members.len() as f64;
        members / f64::from(self.counts[cluster.condition].max(1))
    }

    fn solve_bench(&mut self, index: u32) {
        // Off the origin by half a slice of 256, at which a normal variable would be infinite.
        let point = self.sobol.point(index).map(|x| {
            let moved = x + 1.0 / 512.0;
            if moved < 1.0 { moved } else { moved - 1.0 + 1.0 / 65_536.0 }
        });
        let draw = Draw::new(point);
        let setup = &self.setup;
        let bank = draw.bank(&setup.bank);
        let (Ok(supply), Ok(plate)) =
            (draw.supply(&setup.supply, self.supply_volts, self.supply_deviation), draw.plate(&setup.plate))
        else {
            return;
        };
        for (place, &condition) in setup.plate.family().conditions().iter().enumerate() {
            let Ok(load) = draw.load(&setup.plate, &plate, condition) else { continue };
            // A lamp that this bench would burn out gives no readings.
            let Ok(sketched) = steady::sketch(&supply, &bank, &load, &mut self.warm[place]) else { continue };
            self.counts[place] += 1;
            let bench = Solved { supply: &supply, bank: &bank, plate: &setup.plate, condition, load: &load };
            let (ending, values, open) = bench.expected(&sketched, self.averaging);
            let known = self.clusters.iter_mut().find(|one| one.condition == place && one.ending == ending);
            if let Some(cluster) = known {
                cluster.add(values);
            } else {
                let mut cluster = Cluster {
                    condition: place,
                    behaviours: behaviours(setup.plate.family(), condition, ending),
                    members: Vec::new(),
                    open,
                    mean: [0.0; QUANTITIES],
                    moments: [[0.0; QUANTITIES]; QUANTITIES],
                    ending,
                };
                cluster.add(values);
                self.clusters.push(cluster);
            }
        }
    }
}

/// Half the conduction angle that stands for the pulses of a transformer supply, radian: 70 degrees, since part of its
/// current is a sinusoid beside them (design value).
const USUAL_HALF_ANGLE: f64 = 1.22;

/// One condition on one bench.
struct Solved<'a> {
    supply: &'a Supply,
    bank: &'a Bank,
    plate: &'a Plate,
    condition: Condition,
    load: &'a Load,
}

impl Solved<'_> {
    fn expected(
        &self,
        sketched: &Sketched,
        averaging: bool,
    ) -> (Ending, [f64; QUANTITIES], [f64; QUANTITIES]) {
        let family: Family = self.plate.family();
        let (plug, plug_deviation) = plug_ohms(family, self.condition, self.load);
        let mut open = MODEL;
        open[Kind::PlugOhms.index()] = plug_deviation;
        let (ending, point) = match sketched {
            Sketched::Settles(point) => (Ending::Settles(point.mode), point),
            Sketched::DoesNotStart(point) => (Ending::DoesNotStart, point),
            Sketched::Hunts => return self.pulsing(plug, open),
        };
        let (by_current, by_load) = if averaging { self.factors(point) } else { (1.0, 1.0) };
        let values = [
            self.supply.volts(),
            point.bank_volts / by_current,
            point.load_volts / by_load,
            point.amps / by_current,
            point.load_watts,
            plug,
            point.hottest_kelvin,
        ];
        (ending, core::array::from_fn(|place| scaled(place, values[place])), open)
    }

    /// While it pulses, everything is somewhere between off and a short.
    fn pulsing(
        &self,
        plug: f64,
        mut open: [f64; QUANTITIES],
    ) -> (Ending, [f64; QUANTITIES], [f64; QUANTITIES]) {
        let volts = self.supply.volts();
        let short = self.bank.at_volts(volts);
        let most = [volts, volts, volts, short.amps, volts * short.amps / 4.0, plug, short.hottest_kelvin];
        let least = [volts, 0.0, 0.0, 0.0, 0.0, plug, AMBIENT_KELVIN];
        let ends: [(f64, f64); QUANTITIES] =
            core::array::from_fn(|place| (scaled(place, least[place]), scaled(place, most[place])));
        for place in [1, 2, 3, 4, LOOK] {
            let (low, high) = ends[place];
            open[place] = libm::hypot(open[place], (high - low) / libm::sqrt(12.0));
        }
        (Ending::Hunts, ends.map(|(low, high)| f64::midpoint(low, high)), open)
    }

    /// True RMS over what an averaging meter shows, of the current and of the equipment's volts.
    fn factors(&self, point: &Sketch) -> (f64, f64) {
        let pulses = |half_angle: f64| (current_factor(half_angle), load_volts_factor(half_angle));
        match self.load {
            _ if self.supply.is_direct() || point.amps <= 0.0 => (1.0, 1.0),
            Load::HalfShort(short) => {
                (HALF_WAVE_FACTOR, half_wave_load_factor(short.ohms() * point.amps / point.bank_volts))
            }
            Load::Rectifier(rectifier) => {
                let crest = rectifier.open_volts(self.supply.volts(), self.supply.hertz()).max(1.0);
                pulses(libm::acos((point.load_dc_volts.unwrap_or(0.0) / crest).clamp(0.0, 1.0)))
            }
            Load::PowerSupply(_) => pulses(USUAL_HALF_ANGLE),
            _ => (1.0, 1.0),
        }
    }
}

impl Cluster {
    /// Takes in a bench. Mean and moments follow bench by bench (B. P. Welford, Technometrics 4 (1962) 419), so a forecast in
    /// slices costs no more than a whole one.
    fn add(&mut self, values: [f64; QUANTITIES]) {
        self.members.push(values);
        let count = self.count();
        for row in 0..QUANTITIES {
            let off = values[row] - self.mean[row];
            self.mean[row] += off / count;
            // Columns up to here have their new mean already.
            for column in 0..=row {
                self.moments[row][column] += off * (values[column] - self.mean[column]);
            }
        }
    }

    #[expect(clippy::cast_precision_loss, reason = "at most 256 benches")]
    fn count(&self) -> f64 {
        self.members.len() as f64
    }

    /// Covariance of two quantities over the members.
    pub(crate) fn covariance(&self, one: usize, other: usize) -> f64 {
        self.moments[one.max(other)][one.min(other)] / self.count()
    }
}
