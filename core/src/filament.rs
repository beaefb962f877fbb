//! A filament's resistance and power against its temperature: the one curve behind every lamp.
//!
//! `R(T) = R0 rho(T)/rho(T0)` and
//! `P(T) = W0 [(1-g) (M(T)-M(Ta))/(M(T0)-M(Ta)) + g (T^n-Ta^n)/(T0^n-Ta^n)]`, with `M = eps sigma T^4` and
//! `n = 1.7` for conduction through a stagnant film of argon (I. Langmuir, Physical Review 34 (1912) 401).

use crate::tungsten::{AMBIENT_KELVIN, HIGHEST_KELVIN, Properties};

/// Exponent of the heat that an argon film conducts, against temperature (Langmuir 1912).
const FILM_EXPONENT: f64 = 1.7;

/// Logarithm of the least rise above ambient that the curve resolves, 1e-20 K: picoamperes in any lamp.
const LEAST_LN_RISE: f64 = -46.051_701_859_880_914;

/// Logarithm of the greatest rise, 3300 K.
const MOST_LN_RISE: f64 = 8.101_677_747_454_572;

/// The numbers that fix one filament.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Shape {
    /// Volts at the rating.
    pub volts: f64,
    /// Watts at the rating.
    pub watts: f64,
    /// Temperature at the rating, kelvin.
    pub kelvin: f64,
    /// Share of the input carried away by the filling gas at the rating, 0 to 0.5.
    pub gas_share: f64,
}

/// A filament as a curve in its temperature. Two are equal that have the same numbers and the very same tables.
#[derive(Debug, Clone)]
pub struct Filament {
    shape: Shape,
    tungsten: &'static Properties,
    ohms_per_resistivity: f64,
    watts_per_exitance: f64,
    watts_per_film: f64,
}

/// One point of the curve. `volts` and `amps` are RMS, or DC.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct FilamentPoint {
    /// Temperature above 300 K, kelvin.
    pub rise: f64,
    /// Resistance, ohms.
    pub ohms: f64,
    /// Power that holds this temperature, watts.
    pub watts: f64,
    /// Slope of ln ohms against ln rise.
    ohms_slope: f64,
    /// Slope of ln watts against ln rise.
    watts_slope: f64,
}

impl PartialEq for Filament {
    fn eq(&self, other: &Self) -> bool {
        // The other numbers follow from these; comparing tables row by row would cost as much as a search.
        self.shape == other.shape && core::ptr::eq(self.tungsten, other.tungsten)
    }
}

impl FilamentPoint {
    /// Temperature, kelvin.
    pub fn kelvin(&self) -> f64 {
        AMBIENT_KELVIN + self.rise
    }

    /// RMS or DC volts that hold this temperature.
    pub fn volts(&self) -> f64 {
        libm::sqrt(self.watts * self.ohms)
    }

    /// RMS or DC amperes that hold this temperature.
    pub fn amps(&self) -> f64 {
        libm::sqrt(self.watts / self.ohms)
    }

    /// Slope of ln volts against ln rise: 0.5 when barely warm, up to 1.3.
    pub fn volts_slope(&self) -> f64 {
        0.5 * (self.watts_slope + self.ohms_slope)
    }

    /// Slope of ln amperes against ln rise.
    pub fn amps_slope(&self) -> f64 {
        0.5 * (self.watts_slope - self.ohms_slope)
    }
}

impl Filament {
    /// Fixes the curve; `shape` has been validated by the lamp that owns it.
    pub fn new(shape: Shape, tungsten: &'static Properties) -> Self {
        let rise = shape.kelvin - AMBIENT_KELVIN;
        let exitance = tungsten.exitance_above_ambient(rise).0;
        Self {
            shape,
            tungsten,
            ohms_per_resistivity: shape.volts * shape.volts
                / shape.watts
                / tungsten.resistivity.at(shape.kelvin),
            watts_per_exitance: (1.0 - shape.gas_share) * shape.watts / exitance,
            watts_per_film: shape.gas_share * shape.watts / film(rise).0,
        }
    }

    /// The numbers that fix it.
    pub const fn shape(&self) -> Shape {
        self.shape
    }

    /// The same filament with other tables of tungsten.
    #[must_use]
    pub fn with_tungsten(&self, tungsten: &'static Properties) -> Self {
        Self::new(self.shape, tungsten)
    }

    /// Resistance at 300 K, ohms.
    pub fn cold_ohms(&self) -> f64 {
        self.ohms_per_resistivity * self.tungsten.resistivity.at(AMBIENT_KELVIN)
    }

    /// Heat radiated at `kelvin`, watts, without what the surroundings give back.
    pub fn radiated_watts(&self, kelvin: f64) -> f64 {
        self.watts_per_exitance * self.tungsten.exitance_above_ambient(kelvin - AMBIENT_KELVIN).0
    }

    /// The point at a rise above 300 K, kelvin, up to 3300.
    pub fn at_rise(&self, rise: f64) -> FilamentPoint {
        let rise = rise.clamp(0.0, HIGHEST_KELVIN - AMBIENT_KELVIN);
        let (more, resistivity_slope) = self.tungsten.resistivity.above_ambient(rise);
        let resistivity = self.tungsten.resistivity.at(AMBIENT_KELVIN) + more;
        let (exitance, exitance_slope) = self.tungsten.exitance_above_ambient(rise);
        let mut watts = self.watts_per_exitance * exitance;
        let mut growth = self.watts_per_exitance * exitance_slope;
        if self.watts_per_film > 0.0 {
            let (film, film_slope) = film(rise);
            watts += self.watts_per_film * film;
            growth += self.watts_per_film * film_slope;
        }
        FilamentPoint {
            rise,
            ohms: self.ohms_per_resistivity * resistivity,
            watts,
            ohms_slope: rise * resistivity_slope / resistivity,
            watts_slope: if watts > 0.0 { rise * growth / watts } else { 1.0 },
        }
    }

    /// The point at a logarithm of the rise: the variable in which every search runs, since current, voltage
    /// and power are close to powers of the rise over ten decades.
    pub fn at_ln_rise(&self, ln_rise: f64) -> FilamentPoint {
        self.at_rise(libm::exp(ln_rise))
    }

    /// The span of [`Self::at_ln_rise`].
    pub const fn ln_rise_span() -> (f64, f64) {
        (LEAST_LN_RISE, MOST_LN_RISE)
    }

    /// A first guess of the logarithm of the rise for a share of the rated voltage.
    pub fn guess_ln_rise(&self, share_of_volts: f64) -> f64 {
        let ln_share = libm::log(share_of_volts.max(1e-30));
        let rated = libm::log(self.shape.kelvin - AMBIENT_KELVIN);
        // Slopes of this curve itself for a gas-filled mains lamp: radiating, then conducting, then barely warm.
        let bend = -3.0;
        if ln_share > bend { rated + 0.49 * ln_share } else { rated + 0.49 * bend + 1.6 * (ln_share - bend) }
    }

    /// The point at a voltage, or the hottest of the curve where the voltage would melt the filament; the cold one for
    /// anything that is not above zero.
    pub fn at_volts(&self, volts: f64) -> FilamentPoint {
        let target = 2.0 * libm::log(volts);
        self.search((volts / self.shape.volts).max(0.0), |point| {
            (target - libm::log(point.watts * point.ohms)) / (2.0 * point.volts_slope())
        })
    }

    /// The point at a current, or the hottest of the curve where the current would melt the filament; the cold one for
    /// anything that is not above zero.
    pub fn at_amps(&self, amps: f64) -> FilamentPoint {
        let target = 2.0 * libm::log(amps);
        let share = amps * self.shape.volts / self.shape.watts;
        self.search(libm::pow(share.max(0.0), 1.85), |point| {
            (target - libm::log(point.watts / point.ohms)) / (2.0 * point.amps_slope())
        })
    }

    /// Newton's method in the logarithm of the rise, where both curves are nearly straight: their slopes change by
    /// less than a factor of four over the whole span, so a clamped step cannot run away.
    fn search(&self, share: f64, step_from: impl Fn(&FilamentPoint) -> f64) -> FilamentPoint {
        if share <= 0.0 {
            return self.at_rise(0.0);
        }
        let (low, high) = Self::ln_rise_span();
        let mut x = self.guess_ln_rise(share).clamp(low, high);
        let mut point = self.at_ln_rise(x);
        for _ in 0..MOST_STEPS {
            let step = step_from(&point).clamp(-3.0, 3.0);
            let next = (x + step).clamp(low, high);
            if next == x {
                break;
            }
            x = next;
            point = self.at_ln_rise(x);
            if step.abs() < CONVERGED {
                break;
            }
        }
        point
    }
}

/// More steps than crossing the whole span by clamped ones takes.
const MOST_STEPS: usize = 60;

/// A Newton step this small leaves an error of its square, below the last bit.
const CONVERGED: f64 = 1e-8;

/// `(T^n - Ta^n) / Ta^n`, free of cancellation for a small rise, and its slope, per kelvin.
fn film(rise: f64) -> (f64, f64) {
    let ln_ratio = libm::log1p(rise / AMBIENT_KELVIN);
    let film = libm::expm1(FILM_EXPONENT * ln_ratio);
    (film, FILM_EXPONENT * (film + 1.0) / (AMBIENT_KELVIN + rise))
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::tungsten::STANDARD;

    fn mains_lamp() -> Filament {
        Filament::new(Shape { volts: 230.0, watts: 100.0, kelvin: 2800.0, gas_share: 0.2 }, &STANDARD)
    }

    #[test]
    fn the_span_is_the_logarithm_of_its_ends() {
        assert!((libm::log(1e-20) - LEAST_LN_RISE).abs() < 1e-12);
        assert!((libm::log(HIGHEST_KELVIN - AMBIENT_KELVIN) - MOST_LN_RISE).abs() < 1e-12);
    }

    #[test]
    fn the_rating_is_on_the_curve() {
        let point = mains_lamp().at_volts(230.0);
        assert!((point.kelvin() - 2800.0).abs() < 1e-6);
        assert!((point.watts - 100.0).abs() < 1e-8);
    }

    #[test]
    fn voltage_and_current_find_the_same_point() {
        let filament = mains_lamp();
        for volts in [1e-9, 1e-6, 1e-3, 0.1, 1.0, 7.0, 28.0, 67.0, 230.0, 260.0] {
            let point = filament.at_volts(volts);
            assert!((point.volts() / volts - 1.0).abs() < 1e-12, "{volts} V: {}", point.volts());
            let again = filament.at_amps(point.amps());
            assert!((again.volts() / volts - 1.0).abs() < 1e-11, "{volts} V: {}", again.volts());
        }
    }

    #[test]
    fn an_overdriven_filament_ends_at_the_hottest_row() {
        assert!((mains_lamp().at_volts(2000.0).kelvin() - HIGHEST_KELVIN).abs() < 1e-9);
    }
}
