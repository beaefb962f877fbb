//! A rectifier, reservoir and draw behind the mains, with what stands beside it: a transformer's magnetising
//! branch and core, valve heaters.
//!
//! Everything is referred to the mains side. In parallel stand a saturating magnetising reactance, a resistance
//! (core loss), the heaters, and, through a series resistance (the windings), the rectifier. The magnetising
//! current is taken as a sinusoid a quarter period behind the voltage, so that it adds in quadrature; the pulse is
//! then that of a rectifier behind the Thevenin equivalent of the rest, and all averages are closed forms.

use core::cell::Cell;
use core::f64::consts::{FRAC_PI_2, SQRT_2};

use super::conduction::Pulse;
use super::{FAR, Feed, Terminal};
use crate::error::{Field, InputError, within};
use crate::filament::{Filament, Shape};
use crate::roots::{self, Tolerance};
use crate::tungsten::STANDARD;

/// The numbers that describe a [`PowerSupply`], referred to the mains side.
#[derive(Debug, Clone, PartialEq)]
pub struct PowerSupplySpec {
    /// Rated volts (1 to 1000).
    pub rated_volts: f64,
    /// Magnetising current at rated volts, amperes RMS (0 for no transformer, to 100).
    pub magnetising_amps: f64,
    /// Resistance in parallel, ohms (1 to 1e12): core loss.
    pub core_ohms: f64,
    /// Watts of tungsten heaters at rated volts (0 for none, to 1e4). The draw waits for them.
    pub heater_watts: f64,
    /// Resistance ahead of the rectifier, ohms (0 to 1e6): primary and reflected secondary winding.
    pub winding_ohms: f64,
    /// Forward voltage of the diodes (0 to 100 V).
    pub diode_volts: f64,
    /// One pulse a period instead of two.
    pub half_wave: bool,
    /// Reservoir, farads (1e-12 to 1); only the first seconds depend on it.
    pub farads: f64,
    /// Resistance of what draws from the reservoir, ohms (1e-3 to 1e12).
    pub draw_ohms: f64,
}

/// Rectifier, reservoir and draw with what stands beside them; see the module's text.
#[derive(Debug, Clone, PartialEq)]
pub struct PowerSupply {
    spec: PowerSupplySpec,
    heater: Option<Filament>,
}

/// Share of the rated magnetising current that an unsaturated core would take, and the power with which the rest
/// grows: the knee of an ordinary stamped core run close to saturation (design value, no source).
const LINEAR_SHARE: f64 = 0.6;

/// Temperature of a heater at its rating, kelvin: its resistance is then 6.3 times the cold one (published range
/// 5 to 7.1 for tungsten at 1200 to 1500 K, derived).
const HEATER_KELVIN: f64 = 1350.0;

/// Shares of that temperature between which a cathode goes from no emission to enough (design values, no source).
const EMISSION: (f64, f64) = (0.75, 0.93);

/// How closely heater voltage and magnetising current are found, relatively: a tenth of what the search around them
/// asks for.
const INNER: f64 = 1e-11;

/// Source resistance that stands for none, ohms.
const STIFF_OHMS: f64 = 1e-6;

/// How closely the coarse searches end.
const COARSE: f64 = 1e-5;

/// Where the inner searches of a coarse response ended last: the next ones begin there.
#[derive(Debug, Clone)]
pub(crate) struct Near {
    heater_ln_rise: Cell<f64>,
    magnetising_amps: Cell<f64>,
}

impl Default for Near {
    fn default() -> Self {
        Self { heater_ln_rise: Cell::new(f64::NAN), magnetising_amps: Cell::new(f64::NAN) }
    }
}

/// What a supply takes at one feed.
struct Response {
    amps: f64,
    watts: f64,
    dc_volts: f64,
}

/// Everything in phase with the mains side, given the magnetising current.
struct InPhase {
    amps: f64,
    watts: f64,
    dc_volts: f64,
    /// RMS of the fundamental, and of the whole waveform.
    fundamental_volts: f64,
    volts: f64,
}

/// What stands beside the rectifier at one moment.
#[derive(Clone, Copy)]
struct Beside {
    siemens: f64,
    /// Share of the full draw that flows.
    emission: f64,
}

impl PowerSupply {
    /// Checks and keeps the numbers.
    ///
    /// # Errors
    /// The first property that is not finite or out of range.
    pub fn new(spec: PowerSupplySpec) -> Result<Self, InputError> {
        let volts = within(Field::Volts, spec.rated_volts, 1.0, 1000.0)?;
        within(Field::Amps, spec.magnetising_amps, 0.0, 100.0)?;
        within(Field::Ohms, spec.core_ohms, 1.0, 1e12)?;
        let watts = within(Field::Watts, spec.heater_watts, 0.0, 1e4)?;
        within(Field::SeriesOhms, spec.winding_ohms, 0.0, 1e6)?;
        within(Field::DiodeVolts, spec.diode_volts, 0.0, 100.0)?;
        within(Field::Farads, spec.farads, 1e-12, 1.0)?;
        within(Field::Ohms, spec.draw_ohms, 1e-3, 1e12)?;
        let shape = Shape { volts, watts, kelvin: HEATER_KELVIN, gas_share: 0.0 };
        let heater = (watts > 0.0).then(|| Filament::new(shape, &STANDARD));
        Ok(Self { spec, heater })
    }

    /// The numbers.
    pub const fn spec(&self) -> &PowerSupplySpec {
        &self.spec
    }

    /// The heaters, if any.
    pub const fn heater(&self) -> Option<&Filament> {
        self.heater.as_ref()
    }

    /// Share of the full draw that flows with the heaters at a temperature, kelvin.
    pub fn emission(&self, heater_kelvin: f64) -> f64 {
        if self.heater.is_none() {
            return 1.0;
        }
        let (none, all) = (EMISSION.0 * HEATER_KELVIN, EMISSION.1 * HEATER_KELVIN);
        ((heater_kelvin - none) / (all - none)).clamp(0.0, 1.0)
    }

    /// Magnetising amperes RMS at volts RMS.
    pub(crate) fn magnetising_amps(&self, volts: f64) -> f64 {
        let share = volts / self.spec.rated_volts;
        let square = share * share;
        let eighth = square * square * square * square;
        self.spec.magnetising_amps * share * (LINEAR_SHARE + (1.0 - LINEAR_SHARE) * eighth)
    }

    /// Real power straight on a supply of `volts`, watts. Such a supply gives way to nothing, so nothing is searched.
    pub(crate) fn watts_at(&self, volts: f64) -> f64 {
        let feed = Feed { volts, hertz: 50.0, ohms: STIFF_OHMS, amps: 0.0 };
        self.behind(&feed, self.magnetising_amps(volts), self.beside(volts)).watts
    }

    /// What stands beside the rectifier with `volts` on the mains side for long.
    fn beside(&self, volts: f64) -> Beside {
        let core = 1.0 / self.spec.core_ohms;
        self.heater.as_ref().map_or(Beside { siemens: core, emission: 1.0 }, |heater| {
            let point = heater.at_volts(volts);
            Beside { siemens: core + 1.0 / point.ohms, emission: self.emission(point.kelvin()) }
        })
    }

    /// What it takes, its inner searches ended at `inner`.
    fn respond(&self, feed: &Feed, inner: f64) -> Response {
        let Some(heater) = &self.heater else {
            return self.with(feed, self.beside(feed.volts), inner).0;
        };
        // Find the heater voltage that the heaters themselves leave.
        let left = |ln_volts: f64| libm::log(self.with(feed, self.beside(libm::exp(ln_volts)), inner).1);
        let most = libm::log(feed.volts);
        let span = (most - 20.0, most);
        let guess = most - libm::log1p(0.7 * feed.ohms / heater.at_volts(0.6 * feed.volts).ohms);
        let tolerance = Tolerance { x: inner, residual: inner };
        let found = roots::fixed_point(left, span, guess, tolerance)
            .or_else(|| roots::decreasing_from(|x| left(x) - x, span, guess, tolerance));
        self.with(feed, self.beside(libm::exp(found.map_or(most, |root| root.x))), inner).0
    }

    /// The same a little off, from `near` a point found before: by less than a thousandth once a search around it has
    /// come to rest.
    fn coarse_response(&self, feed: &Feed, near: &Near) -> Response {
        let Some(heater) = &self.heater else {
            return self.with_lagging(feed, self.beside(feed.volts), near).0;
        };
        // In the heaters' temperature, so that their own curve is evaluated and not searched.
        let at = |ln_rise: f64| {
            let point = heater.at_ln_rise(ln_rise);
            let beside = Beside {
                siemens: 1.0 / self.spec.core_ohms + 1.0 / point.ohms,
                emission: self.emission(point.kelvin()),
            };
            (self.with_lagging(feed, beside, near), point.volts())
        };
        let excess = |ln_rise: f64| {
            let ((_, left), volts) = at(ln_rise);
            libm::log(left / volts)
        };
        let guess = match near.heater_ln_rise.get() {
            known if known.is_finite() => known,
            _ => heater.guess_ln_rise(0.6 * feed.volts / self.spec.rated_volts),
        };
        let tolerance = Tolerance { x: COARSE, residual: COARSE };
        let span = Filament::ln_rise_span();
        // A high tension that sets in can be far steeper than a straight line: then the bracket.
        let found = roots::fixed_point(|x| x + excess(x), span, guess, tolerance)
            .or_else(|| roots::decreasing_from(excess, span, guess, tolerance));
        let ln_rise = found.map_or(guess, |root| root.x);
        near.heater_ln_rise.set(ln_rise);
        at(ln_rise).0.0
    }

    /// As [`Self::with`], but with the magnetising current that the last call left: it shifts the voltage in quadrature
    /// only, so that it lags by next to nothing along a search.
    fn with_lagging(&self, feed: &Feed, beside: Beside, near: &Near) -> (Response, f64) {
        let most = if feed.hertz == 0.0 { 0.0 } else { self.magnetising_amps(feed.volts) };
        let most = most.min(0.99 * feed.volts / feed.ohms);
        let mut lagging = near.magnetising_amps.get();
        if lagging.is_nan() {
            lagging = self.magnetising_amps(self.behind(feed, 0.0, beside).fundamental_volts);
        }
        let in_phase = self.behind(feed, lagging.min(most), beside);
        let magnetising = self.magnetising_amps(in_phase.fundamental_volts).min(most);
        near.magnetising_amps.set(magnetising);
        let response = Response {
            amps: libm::hypot(in_phase.amps, magnetising),
            watts: in_phase.watts,
            dc_volts: in_phase.dc_volts,
        };
        (response, in_phase.volts)
    }

    /// The response with what stands beside frozen, and the volts on the mains side.
    fn with(&self, feed: &Feed, beside: Beside, inner: f64) -> (Response, f64) {
        // Find the magnetising current that belongs to the voltage it leaves.
        let direct = feed.hertz == 0.0;
        let most = if direct { 0.0 } else { self.magnetising_amps(feed.volts).min(feed.volts / feed.ohms) };
        let wanted = |amps: f64| self.magnetising_amps(self.behind(feed, amps, beside).fundamental_volts);
        let magnetising = if most > 0.0 {
            let tolerance = Tolerance { x: inner * most, residual: inner * most };
            let gap = |amps: f64| wanted(amps) - amps;
            roots::fixed_point(wanted, (0.0, most), wanted(0.0).min(most), tolerance)
                .or_else(|| roots::between(gap, (0.0, gap(0.0)), (most, gap(most)), tolerance))
                .map_or(most, |root| root.x)
        } else {
            0.0
        };
        let in_phase = self.behind(feed, magnetising, beside);
        let response = Response {
            amps: libm::hypot(in_phase.amps, magnetising),
            watts: in_phase.watts,
            dc_volts: in_phase.dc_volts,
        };
        (response, in_phase.volts)
    }

    fn behind(&self, feed: &Feed, magnetising: f64, beside: Beside) -> InPhase {
        let spec = &self.spec;
        let quadrature = feed.ohms * magnetising;
        let crest_share = if feed.hertz == 0.0 { 1.0 } else { SQRT_2 };
        let source = crest_share * libm::sqrt((feed.volts * feed.volts - quadrature * quadrature).max(0.0));
        // Thevenin equivalent of the source, the bank and what stands beside.
        let share = 1.0 / (1.0 + feed.ohms * beside.siemens);
        let crest = source * share;
        let thevenin = feed.ohms * share;
        let ohms = thevenin + spec.winding_ohms;
        let draw_siemens = beside.emission / spec.draw_ohms;
        if feed.hertz == 0.0 {
            return self.direct(feed, beside, share, draw_siemens);
        }
        let wave = if spec.half_wave { 0.5 } else { 1.0 };
        let pulse = balance(ohms * draw_siemens / wave, spec.diode_volts / crest);
        let unit = crest / ohms;
        let dc_volts = (crest * pulse.share() - spec.diode_volts).max(0.0);
        let mean = wave * unit * pulse.mean();
        let square = wave * unit * unit * pulse.rms() * pulse.rms();
        let fundamental = wave * unit * pulse.fundamental();
        // Bank current is a source sinusoid plus a share of the pulse, so its square is a closed form too.
        let idle = source * share * beside.siemens;
        let amps_square = 0.5 * idle * idle + share * idle * fundamental + share * share * square;
        let volts_square =
            0.5 * crest * crest - thevenin * crest * fundamental + thevenin * thevenin * square;
        InPhase {
            amps: libm::sqrt(amps_square),
            watts: mean * (dc_volts + spec.diode_volts)
                + square * spec.winding_ohms
                + volts_square * beside.siemens,
            dc_volts,
            fundamental_volts: (crest - thevenin * fundamental).max(0.0) / SQRT_2,
            volts: libm::sqrt(volts_square.max(0.0)),
        }
    }

    /// On direct current the diodes conduct all the time.
    fn direct(&self, feed: &Feed, beside: Beside, share: f64, draw_siemens: f64) -> InPhase {
        let spec = &self.spec;
        let ohms = feed.ohms * share + spec.winding_ohms;
        let drive = (feed.volts * share - spec.diode_volts).max(0.0);
        let dc_amps = drive * draw_siemens / (1.0 + ohms * draw_siemens);
        let volts = feed.volts * share - feed.ohms * share * dc_amps;
        let amps = dc_amps + volts * beside.siemens;
        InPhase {
            amps,
            watts: volts * amps,
            dc_volts: drive - dc_amps * ohms,
            fundamental_volts: volts,
            volts,
        }
    }

    pub(super) fn excess(&self, feed: &Feed) -> f64 {
        libm::log(self.respond(feed, INNER).amps / feed.amps).clamp(-FAR, FAR)
    }

    /// The same a little off, from `near` a point found before.
    pub(super) fn coarse_excess(&self, feed: &Feed, near: &Near) -> f64 {
        libm::log(self.coarse_response(feed, near).amps / feed.amps).clamp(-FAR, FAR)
    }

    /// The terminals, as closely as that.
    pub(super) fn coarse_terminal(&self, feed: &Feed, near: &Near) -> Terminal {
        let response = self.coarse_response(feed, near);
        Terminal::from_power(feed, response.watts, Some(response.dc_volts))
    }

    pub(super) fn terminal(&self, feed: &Feed) -> Terminal {
        let response = self.respond(feed, INNER);
        Terminal::from_power(feed, response.watts, Some(response.dc_volts))
    }
}

/// The pulse whose mean is what the draw takes: `(2/pi)(sin t - t cos t) = loading (cos t - drop)`.
///
/// The difference of the sides rises and is convex in `t`, so Newton's method from the right never fails.
fn balance(loading: f64, drop: f64) -> Pulse {
    if loading <= 0.0 || drop >= 1.0 {
        return Pulse { theta: 0.0 };
    }
    let widest = libm::acos(drop);
    let mut theta = libm::cbrt(1.5 * FRAC_PI_2 * 2.0 * loading * (1.0 - drop)).min(widest);
    for _ in 0..40 {
        let (sin, cos) = (libm::sin(theta), libm::cos(theta));
        let gap = Pulse { theta }.mean() - loading * (cos - drop);
        let slope = theta * sin / FRAC_PI_2 + loading * sin;
        let step = gap / slope;
        theta = (theta - step).clamp(theta * 0.1, widest);
        if step.abs() <= 1e-14 * theta {
            break;
        }
    }
    Pulse { theta }
}

#[cfg(test)]
mod tests {
    use super::*;

    fn radio() -> PowerSupply {
        PowerSupply::new(PowerSupplySpec {
            rated_volts: 230.0,
            magnetising_amps: 0.05,
            core_ohms: 15_000.0,
            heater_watts: 0.0,
            winding_ohms: 60.0,
            diode_volts: 1.0,
            half_wave: false,
            farads: 20e-6,
            draw_ohms: 1500.0,
        })
        .expect("in range")
    }

    #[test]
    fn the_terminals_obey_the_power_triangle() {
        for heater_watts in [0.0, 20.0] {
            let spec = PowerSupplySpec { heater_watts, ..radio().spec().clone() };
            let set = PowerSupply::new(spec).expect("in range");
            for ohms in [1.0, 50.0, 300.0, 800.0] {
                let mut feed = Feed { volts: 230.0, hertz: 50.0, ohms, amps: 0.1 };
                feed.amps = set.respond(&feed, INNER).amps;
                let terminal = set.terminal(&feed);
                assert!(terminal.watts <= terminal.volts * feed.amps, "power factor above one at {ohms}");
                assert!(terminal.volts > 0.0 && terminal.volts <= 230.0);
            }
        }
    }

    #[test]
    fn the_pulse_balances_over_the_whole_range() {
        for loading in [1e-9, 1e-4, 0.01, 0.3, 1.0, 30.0, 1e4] {
            for drop in [0.0, 0.01, 0.5, 0.99] {
                let pulse = balance(loading, drop);
                let gap = pulse.mean() - loading * (pulse.share() - drop);
                assert!(gap.abs() < 1e-12 * (1.0 + loading), "{loading} {drop}: {gap}");
            }
        }
    }
}
