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
use crate::tungsten::{AMBIENT_KELVIN, STANDARD};

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

/// Source resistance that stands for none, ohms.
const STIFF_OHMS: f64 = 1e-6;

/// Where the inner searches ended last, and how closely they are to end: the next ones begin there.
#[derive(Debug, Clone)]
pub(crate) struct Near {
    tolerance: f64,
    /// Rise of the heaters, kelvin.
    rise: Cell<f64>,
    /// Half the conduction angle, radian.
    theta: Cell<f64>,
    /// RMS of the fundamental on the mains side, volts.
    volts: Cell<f64>,
}

impl Near {
    const fn new(tolerance: f64) -> Self {
        Self { tolerance, rise: Cell::new(f64::NAN), theta: Cell::new(f64::NAN), volts: Cell::new(f64::NAN) }
    }

    /// A tenth of what the search around them asks for.
    pub(crate) const fn fine() -> Self {
        Self::new(1e-11)
    }

    /// Far below what any meter tells apart.
    pub(crate) const fn coarse() -> Self {
        Self::new(1e-5)
    }
}

/// What a supply takes at one feed.
#[derive(Clone, Copy)]
struct Response {
    amps: f64,
    watts: f64,
    dc_volts: f64,
    /// RMS on the mains side.
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

    /// Magnetising amperes RMS at volts RMS, and amperes per volt more.
    fn magnetising(&self, volts: f64) -> (f64, f64) {
        let share = volts / self.spec.rated_volts;
        let square = share * share;
        let eighth = square * square * square * square;
        let most = self.spec.magnetising_amps;
        let saturated = (1.0 - LINEAR_SHARE) * eighth;
        let slope = most / self.spec.rated_volts * (LINEAR_SHARE + 9.0 * saturated);
        (most * share * (LINEAR_SHARE + saturated), slope)
    }

    /// Magnetising amperes RMS at volts RMS.
    pub(crate) fn magnetising_amps(&self, volts: f64) -> f64 {
        self.magnetising(volts).0
    }

    /// Real power straight on a supply of `volts`, watts. Such a supply gives way to nothing, so nothing is searched.
    pub(crate) fn watts_at(&self, volts: f64) -> f64 {
        let feed = Feed { volts, hertz: 50.0, ohms: STIFF_OHMS, amps: 0.0 };
        let beside = self.heater.as_ref().map_or(self.without_heaters(), |heater| {
            let point = heater.at_volts(volts);
            self.beside(point.ohms, self.emission(point.kelvin()))
        });
        self.behind(&feed, beside, &Near::fine()).watts
    }

    fn without_heaters(&self) -> Beside {
        Beside { siemens: 1.0 / self.spec.core_ohms, emission: 1.0 }
    }

    fn beside(&self, heater_ohms: f64, emission: f64) -> Beside {
        Beside { siemens: 1.0 / self.spec.core_ohms + 1.0 / heater_ohms, emission }
    }

    /// What it takes.
    fn respond(&self, feed: &Feed, near: &Near) -> Response {
        let Some(heater) = &self.heater else {
            return self.behind(feed, self.without_heaters(), near);
        };
        // In the heaters' own state, so that their curve is evaluated and not searched. A hotter heater needs more volts
        // and leaves itself fewer as the high tension sets in: one state meets both.
        let scale = HeaterScale { loading: self.loading(feed, 1.0, 1.0 / self.spec.draw_ohms) };
        let last = Cell::new((f64::NAN, Response { amps: 0.0, watts: 0.0, dc_volts: 0.0, volts: 0.0 }));
        let excess = |state: f64| {
            let (rise, emission) = scale.at(state);
            let point = heater.at_rise(rise);
            let response = self.behind(feed, self.beside(point.ohms, emission), near);
            last.set((state, response));
            near.rise.set(rise);
            libm::log(response.volts / point.volts())
        };
        let guess = match near.rise.get() {
            known if known > 0.0 => scale.of(known),
            _ => {
                let hot = self.spec.rated_volts * self.spec.rated_volts / self.spec.heater_watts;
                let share = feed.volts / self.spec.rated_volts * hot / (hot + feed.ohms);
                scale.of(libm::exp(heater.guess_ln_rise(share)))
            }
        };
        let tolerance = Tolerance { x: 0.1 * near.tolerance, residual: near.tolerance };
        // Along the scale the slope is about -2.
        let found = roots::fixed_point(|x| x + 0.5 * excess(x), HeaterScale::SPAN, guess, tolerance)
            .or_else(|| roots::decreasing_from(excess, HeaterScale::SPAN, guess, tolerance));
        let state = found.map_or(guess, |root| root.x);
        if last.get().0 != state {
            excess(state);
        }
        last.get().1
    }

    /// How heavily a draw loads what stands ahead of it: their resistances' ratio, per conducting wave.
    fn loading(&self, feed: &Feed, share: f64, draw_siemens: f64) -> f64 {
        let wave = if self.spec.half_wave { 0.5 } else { 1.0 };
        (feed.ohms * share + self.spec.winding_ohms) * draw_siemens / wave
    }

    /// RMS of the fundamental on the mains side where `kept` of it would be left without a magnetising current, and how
    /// much of a change of `kept` reaches it, in logarithms: `V^2 + (kept R m(V))^2 = (kept Vs)^2`. The left side grows
    /// and is convex, so Newton's method never fails.
    fn fundamental(&self, feed: &Feed, kept: f64, start: f64) -> (f64, f64) {
        let (all, ohms) = (kept * feed.volts, kept * feed.ohms);
        if self.spec.magnetising_amps == 0.0 {
            return (all, 1.0);
        }
        let mut volts = if start > 0.0 { start.min(all) } else { all };
        let mut reach = 1.0;
        for _ in 0..MOST_STEPS {
            let (amps, slope) = self.magnetising(volts);
            let across = ohms * amps;
            let grown = volts + ohms * across * slope;
            let step = 0.5 * (volts * volts + across * across - all * all) / grown;
            reach = volts / grown;
            volts = (volts - step).min(all);
            // The square of what a step this small leaves is below the last digit.
            if step.abs() <= 1e-8 * volts {
                break;
            }
        }
        (volts, reach)
    }

    /// The response with what stands beside frozen.
    ///
    /// Pulse and magnetising current are found together: each Newton step of the conduction angle is followed by the
    /// voltage that belongs to it.
    fn behind(&self, feed: &Feed, beside: Beside, near: &Near) -> Response {
        let spec = &self.spec;
        // Thevenin equivalent of the source, the bank and what stands beside.
        let share = 1.0 / (1.0 + feed.ohms * beside.siemens);
        let draw_siemens = beside.emission / spec.draw_ohms;
        if feed.hertz == 0.0 {
            return self.direct(feed, beside, share, draw_siemens);
        }
        let thevenin = feed.ohms * share;
        let ohms = thevenin + spec.winding_ohms;
        let wave = if spec.half_wave { 0.5 } else { 1.0 };
        let loading = self.loading(feed, share, draw_siemens);
        let mut pulse = Pulse::at(near.theta.get());
        let mut volts = near.volts.get();
        let mut crest = 0.0;
        for _ in 0..MOST_STEPS {
            // What the pulse leaves of the fundamental.
            let known = pulse.theta >= 0.0;
            let taken = thevenin / ohms * wave;
            let left = if known { 1.0 - taken * pulse.fundamental() } else { 1.0 };
            let reach;
            (volts, reach) = self.fundamental(feed, share * left, volts);
            crest = SQRT_2 * volts / left;
            let room = 1.0 - spec.diode_volts / crest;
            let next = if loading <= 0.0 || room <= 0.0 {
                0.0
            } else if known && pulse.theta > 0.0 {
                // A wider pulse takes from the magnetising current, which leaves it more of a crest.
                let easing = (1.0 - room) * (1.0 - reach) * taken * pulse.fundamental_slope() / left;
                pulse.theta - pulse.balance_step(loading, 1.0 - room, easing)
            } else {
                Pulse::guess(loading, room)
            };
            if (next - pulse.theta).abs() <= near.tolerance * next {
                break;
            }
            pulse = Pulse::at(next.clamp(0.0, FRAC_PI_2));
        }
        near.theta.set(pulse.theta);
        near.volts.set(volts);
        let unit = crest / ohms;
        let dc_volts = (crest * pulse.share() - spec.diode_volts).max(0.0);
        let mean = wave * unit * pulse.mean();
        let square = wave * unit * unit * pulse.mean_square();
        let fundamental = wave * unit * pulse.fundamental();
        // Bank current is a source sinusoid plus a share of the pulse, so its square is a closed form too.
        let idle = crest * beside.siemens;
        let in_phase_square = 0.5 * idle * idle + share * idle * fundamental + share * share * square;
        let volts_square =
            0.5 * crest * crest - thevenin * crest * fundamental + thevenin * thevenin * square;
        let magnetising = self.magnetising_amps(volts);
        Response {
            amps: libm::sqrt(in_phase_square + magnetising * magnetising),
            watts: mean * (dc_volts + spec.diode_volts)
                + square * spec.winding_ohms
                + volts_square * beside.siemens,
            dc_volts,
            volts: libm::sqrt(volts_square.max(0.0)),
        }
    }

    /// On direct current the diodes conduct all the time.
    fn direct(&self, feed: &Feed, beside: Beside, share: f64, draw_siemens: f64) -> Response {
        let spec = &self.spec;
        let ohms = feed.ohms * share + spec.winding_ohms;
        let drive = (feed.volts * share - spec.diode_volts).max(0.0);
        let dc_amps = drive * draw_siemens / (1.0 + ohms * draw_siemens);
        let volts = feed.volts * share - feed.ohms * share * dc_amps;
        let amps = dc_amps + volts * beside.siemens;
        Response { amps, watts: volts * amps, dc_volts: drive - dc_amps * ohms, volts }
    }

    pub(super) fn excess(&self, feed: &Feed, near: &Near) -> f64 {
        libm::log(self.respond(feed, near).amps / feed.amps).clamp(-FAR, FAR)
    }

    pub(super) fn terminal(&self, feed: &Feed, near: &Near) -> Terminal {
        let response = self.respond(feed, near);
        Terminal::from_power(feed, response.watts, Some(response.dc_volts))
    }
}

/// More steps than any of these searches takes.
const MOST_STEPS: usize = 60;

/// The state of heaters along which the volts that they leave fall evenly: below 0 and above 1 the logarithm of their
/// rise, between the two the setting in of the high tension. There a heavy draw does most of its work in the first few
/// kelvin, and a pulse behind a resistance grows with the draw as `loading / (1 + loading)`: so does this scale.
struct HeaterScale {
    /// Of the full draw.
    loading: f64,
}

impl HeaterScale {
    /// From where the curve of a filament begins to where it ends.
    const SPAN: (f64, f64) = (-52.0, 2.2);

    /// Rises between which the emission sets in.
    const RISES: (f64, f64) =
        (EMISSION.0 * HEATER_KELVIN - AMBIENT_KELVIN, EMISSION.1 * HEATER_KELVIN - AMBIENT_KELVIN);

    /// Rise, kelvin, and share of the full draw.
    fn at(&self, state: f64) -> (f64, f64) {
        let (none, all) = Self::RISES;
        if state <= 0.0 {
            return (none * libm::exp(state), 0.0);
        }
        if state >= 1.0 {
            return (all * libm::exp(state - 1.0), 1.0);
        }
        let emission = state / (state + (1.0 + self.loading) * (1.0 - state));
        (none + emission * (all - none), emission)
    }

    /// The state at a rise.
    fn of(&self, rise: f64) -> f64 {
        let (none, all) = Self::RISES;
        if rise <= none {
            return libm::log(rise / none);
        }
        if rise >= all {
            return 1.0 + libm::log(rise / all);
        }
        let emission = (rise - none) / (all - none);
        (1.0 + self.loading) * emission / (1.0 + self.loading * emission)
    }
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
                feed.amps = set.respond(&feed, &Near::fine()).amps;
                let terminal = set.terminal(&feed, &Near::fine());
                assert!(terminal.watts <= terminal.volts * feed.amps, "power factor above one at {ohms}");
                assert!(terminal.volts > 0.0 && terminal.volts <= 230.0);
            }
        }
    }

    #[test]
    fn a_larger_resistance_ahead_always_leaves_less_current() {
        // A bank's current grows with its resistance, so there is one steady point and no more. Every feed is searched
        // afresh, and the same comes out as with a search that begins where the last one ended.
        let near = Near::fine();
        for heater_watts in [0.0, 20.0] {
            for (half_wave, magnetising_amps) in [(false, 0.05), (false, 1.0), (true, 0.0)] {
                for draw_ohms in [3.0, 300.0, 1500.0, 1e9] {
                    let spec = PowerSupplySpec {
                        magnetising_amps,
                        heater_watts,
                        half_wave,
                        draw_ohms,
                        ..radio().spec.clone()
                    };
                    let set = PowerSupply::new(spec).expect("in range");
                    for volts in [20.0, 115.0, 230.0, 280.0] {
                        let mut before = f64::INFINITY;
                        for step in 0..200 {
                            let ohms = libm::exp(0.06 * f64::from(step) - 2.0);
                            let feed = Feed { volts, hertz: 50.0, ohms, amps: 1.0 };
                            let amps = set.respond(&feed, &Near::fine()).amps;
                            assert!(amps < before, "{:?} {volts} V {ohms} ohm: {amps} {before}", set.spec);
                            let warm = set.respond(&feed, &near).amps;
                            assert!((warm / amps - 1.0).abs() < 1e-9, "{:?} {volts} V {ohms} ohm", set.spec);
                            before = amps;
                        }
                    }
                }
            }
        }
    }
}
