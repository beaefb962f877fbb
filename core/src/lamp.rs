//! One incandescent lamp: from its printed rating, and from anything measured on it.

use alloc::vec::Vec;

use serde::{Deserialize, Serialize};

use crate::calibrate::{self, Evidence};
use crate::defaults;
use crate::error::{Field, InputError, within};
use crate::filament::{Filament, FilamentPoint, Shape};
use crate::glow::{Glow, luminous_exitance};
use crate::tungsten::{AMBIENT_KELVIN, OTHER_EMISSIVITY, OTHER_RESISTIVITY, STANDARD, STEFAN_BOLTZMANN};

/// What is inside the bulb around the filament.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash)]
#[non_exhaustive]
pub enum Fill {
    /// Nothing: small and old lamps.
    Vacuum,
    /// Argon or krypton with nitrogen: ordinary lamps.
    Gas,
    /// A small hot capsule with a halogen.
    Halogen,
}

impl Fill {
    /// Every fill.
    pub const ALL: [Self; 3] = [Self::Vacuum, Self::Gas, Self::Halogen];

    /// The fill's name in the JSON contract.
    pub const fn name(self) -> &'static str {
        match self {
            Self::Vacuum => "vacuum",
            Self::Gas => "gas",
            Self::Halogen => "halogen",
        }
    }
}

/// Volts across a lamp and amperes through it, measured together.
#[derive(Debug, Clone, Copy, PartialEq, Serialize, Deserialize)]
pub struct Point {
    /// RMS or DC volts.
    pub volts: f64,
    /// RMS or DC amperes.
    pub amps: f64,
}

/// What is known of a lamp. Only the printed volts and watts are needed; the rest beats the defaults.
#[derive(Debug, Clone, Default, PartialEq)]
pub struct LampSpec {
    /// Printed volts.
    pub volts: f64,
    /// Printed watts.
    pub watts: f64,
    /// The fill, if known.
    pub fill: Option<Fill>,
    /// Printed lumens.
    pub lumens: Option<f64>,
    /// Resistance measured on the cold lamp, ohms.
    pub cold_ohms: Option<f64>,
    /// Volts and amperes measured together.
    pub points: Vec<Point>,
    /// Filament temperature at the rating, if known, kelvin.
    pub rated_kelvin: Option<f64>,
    /// Share of the input carried away by the gas at the rating, if known.
    pub gas_share: Option<f64>,
}

/// A lamp that the model can answer for. Two are equal when the same things are known of them.
#[derive(Debug, Clone)]
pub struct Lamp {
    spec: LampSpec,
    fill: Fill,
    filament: Filament,
    /// Lower triangle of the Cholesky factor of the covariance of (ln watts, kelvin, gas share).
    spread: [[f64; 3]; 3],
}

impl PartialEq for Lamp {
    fn eq(&self, other: &Self) -> bool {
        self.spec == other.spec && self.filament == other.filament
    }
}

/// One lamp at one voltage. Volts and amperes are RMS, or DC.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct LampState {
    /// Volts across the lamp.
    pub volts: f64,
    /// Amperes through it.
    pub amps: f64,
    /// Watts it turns into heat and light.
    pub watts: f64,
    /// Filament temperature, kelvin.
    pub kelvin: f64,
}

/// Part of the light that gets past the bulb, base and supports (design value, no source).
const LIGHT_OUT: f64 = 0.87;

impl Lamp {
    /// Allowed printed volts.
    pub const VOLTS: (f64, f64) = (1.0, 500.0);
    /// Allowed printed watts.
    pub const WATTS: (f64, f64) = (0.05, 5000.0);
    /// Allowed filament temperatures at the rating, kelvin.
    pub const RATED_KELVIN: (f64, f64) = (1500.0, 3400.0);
    /// Allowed gas shares.
    pub const GAS_SHARE: (f64, f64) = (0.0, 0.5);
    /// Most measured points.
    pub const MOST_POINTS: usize = 64;
    /// How many [`Self::variant`]s there are.
    pub const VARIANTS: usize = 8;

    /// An ordinary lamp with `volts` (1 to 500 V) and `watts` (0.05 to 5000 W) printed on it.
    ///
    /// # Errors
    /// As [`Self::from_spec`].
    ///
    /// ```
    /// let lamp = lampladder_core::lamp::Lamp::new(230.0, 100.0)?;
    /// let state = lamp.at_volts(67.0);
    /// assert!((0.22..0.24).contains(&state.amps));
    /// # Ok::<(), lampladder_core::error::InputError>(())
    /// ```
    pub fn new(volts: f64, watts: f64) -> Result<Self, InputError> {
        Self::from_spec(LampSpec { volts, watts, ..LampSpec::default() })
    }

    /// A lamp from all that is known of it.
    ///
    /// Printed lumens set the default of the filament temperature; a cold resistance and measured points move
    /// temperature, gas share and watts by weighted least squares against those defaults and their spread, so
    /// that a good measurement outweighs them; a given temperature or gas share is taken as exact.
    ///
    /// # Errors
    /// The first property that is not finite or out of range.
    pub fn from_spec(spec: LampSpec) -> Result<Self, InputError> {
        let volts = within(Field::Volts, spec.volts, Self::VOLTS.0, Self::VOLTS.1)?;
        let watts = within(Field::Watts, spec.watts, Self::WATTS.0, Self::WATTS.1)?;
        let optional = |field, value: Option<f64>, (low, high)| {
            value.map(|value| within(field, value, low, high)).transpose()
        };
        let lumens = optional(Field::Lumens, spec.lumens, (watts * 0.1, watts * 40.0))?;
        let rated_ohms = volts * volts / watts;
        optional(Field::ColdOhms, spec.cold_ohms, (rated_ohms / 25.0, rated_ohms / 5.0))?;
        let given_kelvin = optional(Field::RatedKelvin, spec.rated_kelvin, Self::RATED_KELVIN)?;
        let given_share = optional(Field::GasShare, spec.gas_share, Self::GAS_SHARE)?;
        if spec.points.len() > Self::MOST_POINTS {
            #[expect(clippy::cast_precision_loss, reason = "a count for a message")]
            let (value, high) = (spec.points.len() as f64, Self::MOST_POINTS as f64);
            return Err(InputError::OutOfRange { field: Field::Points, value, low: 0.0, high });
        }
        for point in &spec.points {
            within(Field::Volts, point.volts, volts * 1e-3, volts * 1.3)?;
            let rated_amps = watts / volts;
            within(Field::Amps, point.amps, rated_amps * 1e-2, rated_amps * 2.0)?;
        }

        let fill = spec.fill.unwrap_or_else(|| defaults::fill(volts, watts));
        let share = given_share.unwrap_or_else(|| defaults::gas_share(fill, volts, watts));
        let kelvin =
            given_kelvin.unwrap_or_else(|| match lumens.or_else(|| defaults::lumens(fill, volts, watts)) {
                Some(lumens) => kelvin_for_lumens(lumens, watts, share),
                None => defaults::kelvin(fill, volts, watts),
            });
        let deviations = [
            defaults::watts_deviation(watts) / watts,
            if given_kelvin.is_some() { 0.0 } else { defaults::kelvin_deviation(fill, volts) },
            if given_share.is_some() { 0.0 } else { defaults::gas_share_deviation(fill, volts) },
        ];
        let shape = Shape { volts, watts, kelvin, gas_share: share };
        let evidence = Evidence { cold_ohms: spec.cold_ohms, points: &spec.points };
        let fitted = calibrate::fit(shape, deviations, &evidence);
        Ok(Self { spec, fill, filament: Filament::new(fitted.shape, &STANDARD), spread: fitted.spread })
    }

    /// What was given.
    pub const fn spec(&self) -> &LampSpec {
        &self.spec
    }

    /// Printed volts.
    pub const fn rated_volts(&self) -> f64 {
        self.spec.volts
    }

    /// Printed watts.
    pub const fn rated_watts(&self) -> f64 {
        self.spec.watts
    }

    /// Filament temperature at the rated voltage, kelvin.
    pub const fn rated_kelvin(&self) -> f64 {
        self.filament.shape().kelvin
    }

    /// Share of the input carried away by the gas at the rating.
    pub const fn gas_share(&self) -> f64 {
        self.filament.shape().gas_share
    }

    /// The fill.
    pub const fn fill(&self) -> Fill {
        self.fill
    }

    /// The curve behind the lamp.
    pub const fn filament(&self) -> &Filament {
        &self.filament
    }

    /// Resistance at 300 K, ohms.
    pub fn cold_ohms(&self) -> f64 {
        self.filament.cold_ohms()
    }

    /// Luminous flux at a filament temperature, lumens.
    pub fn lumens(&self, kelvin: f64) -> f64 {
        if kelvin <= AMBIENT_KELVIN {
            return 0.0;
        }
        let exitance = STANDARD.emissivity.at(kelvin) * STEFAN_BOLTZMANN * kelvin * kelvin * kelvin * kelvin;
        LIGHT_OUT * luminous_exitance(kelvin) / exitance * self.filament.radiated_watts(kelvin)
    }

    /// The glow at a filament temperature.
    pub fn glow(&self, kelvin: f64) -> Glow {
        Glow::at(kelvin, self.rated_kelvin())
    }

    /// The state with `volts` across the lamp. From 0 V to where the filament reaches 3600 K; above, that end.
    pub fn at_volts(&self, volts: f64) -> LampState {
        LampState::from(&self.filament.at_volts(volts))
    }

    /// The state with `amps` through the lamp; above the current of 3600 K, that end.
    pub fn at_amps(&self, amps: f64) -> LampState {
        LampState::from(&self.filament.at_amps(amps))
    }

    /// The state at a filament temperature, 300 to 3600 K.
    ///
    /// # Errors
    /// [`Field::Kelvin`] out of range or not finite.
    pub fn at_kelvin(&self, kelvin: f64) -> Result<LampState, InputError> {
        let kelvin = within(Field::Kelvin, kelvin, AMBIENT_KELVIN, crate::tungsten::HIGHEST_KELVIN)?;
        Ok(LampState::from(&self.filament.at_rise(kelvin - AMBIENT_KELVIN)))
    }

    /// The lamp moved by `deviations` along the independent directions of its spread, by the tables named: one of the
    /// real lamps that this one may be.
    pub(crate) fn moved(&self, deviations: [f64; 3], tables: Tables) -> Self {
        let step = core::array::from_fn(|row| {
            self.spread[row].iter().zip(deviations).map(|(spread, deviation)| spread * deviation).sum()
        });
        let tungsten = match tables {
            Tables::Standard => &STANDARD,
            Tables::OtherResistivity => &OTHER_RESISTIVITY,
            Tables::OtherEmissivity => &OTHER_EMISSIVITY,
        };
        let shape = calibrate::shifted(self.filament.shape(), step);
        Self { filament: Filament::new(shape, tungsten), ..self.clone() }
    }

    /// One of [`Self::VARIANTS`] equally serious ways in which this lamp may differ from the model, for bands.
    ///
    /// 0 to 5 are one standard deviation up and down along each independent direction of (watts, temperature,
    /// gas share): even is up, odd is down. 6 and 7 use the other published resistivity and emissivity.
    #[must_use]
    pub fn variant(&self, index: usize) -> Self {
        let filament = match index {
            6 => self.filament.with_tungsten(&OTHER_RESISTIVITY),
            7 => self.filament.with_tungsten(&OTHER_EMISSIVITY),
            _ => {
                let sign = if index.is_multiple_of(2) { 1.0 } else { -1.0 };
                let step = core::array::from_fn(|row| sign * self.spread[row][(index / 2).min(2)]);
                Filament::new(calibrate::shifted(self.filament.shape(), step), &STANDARD)
            }
        };
        Self { filament, ..self.clone() }
    }
}

impl From<&FilamentPoint> for LampState {
    fn from(point: &FilamentPoint) -> Self {
        Self { volts: point.volts(), amps: point.amps(), watts: point.watts, kelvin: point.kelvin() }
    }
}

/// Which published tables of tungsten a lamp is computed from.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub(crate) enum Tables {
    Standard,
    OtherResistivity,
    OtherEmissivity,
}

/// The filament temperature at which the rating gives `lumens`.
fn kelvin_for_lumens(lumens: f64, watts: f64, gas_share: f64) -> f64 {
    let efficacy = |kelvin: f64| {
        let exitance = STANDARD.emissivity.at(kelvin) * STEFAN_BOLTZMANN * kelvin * kelvin * kelvin * kelvin;
        LIGHT_OUT * luminous_exitance(kelvin) / exitance
    };
    let wanted = libm::log(lumens / ((1.0 - gas_share) * watts));
    let (low, high) = Lamp::RATED_KELVIN;
    // Efficacy rises with about the eighth power of temperature: divided so, the slope is near one.
    let found = crate::roots::decreasing_from(
        |ln_kelvin| (wanted - libm::log(efficacy(libm::exp(ln_kelvin)))) / 8.0,
        (libm::log(low), libm::log(high)),
        libm::log(2700.0),
        crate::roots::Tolerance { x: 1e-9, residual: 1e-9 },
    );
    match found {
        Some(root) => libm::exp(root.x),
        None if wanted > libm::log(efficacy(2700.0)) => high,
        None => low,
    }
}
