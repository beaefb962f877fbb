//! Published numbers to check against, from `tests/reference/`, each loader with its source and status.
//!
//! *Published second hand*: the digits were read in a document that quotes the named source. *From memory*: seen
//! in no document, so good for a loose check only. *Derived*: computed from published digits.

use std::path::PathBuf;

use serde::Deserialize;
use serde::de::DeserializeOwned;

/// The rows of a reference file.
fn rows<T: DeserializeOwned>(name: &str) -> Vec<T> {
    let path = folder("reference").join(name);
    let mut reader =
        csv::Reader::from_path(&path).unwrap_or_else(|error| panic!("{}: {error}", path.display()));
    let rows: Result<Vec<T>, _> = reader.deserialize().collect();
    rows.unwrap_or_else(|error| panic!("{}: {error}", path.display()))
}

/// A folder of this crate.
pub fn folder(name: &str) -> PathBuf {
    PathBuf::from(env!("CARGO_MANIFEST_DIR")).join(name)
}

/// A row of [`resistivity`], micro-ohm centimetre.
#[derive(Debug, Clone, Copy, Deserialize)]
pub struct Resistivity {
    /// Temperature, kelvin.
    pub kelvin: f64,
    /// Forsythe and Worthing.
    #[serde(rename = "microohm_cm_forsythe_worthing_1925")]
    pub forsythe_worthing: f64,
    /// White and Minges.
    #[serde(rename = "microohm_cm_white_minges_1997")]
    pub white_minges: f64,
}

/// Resistivity of tungsten: W. E. Forsythe, A. G. Worthing, Astrophysical Journal 61 (1925) 146, the same digits
/// as CRC Handbook 60th ed. (1979) p. E-381; G. K. White, M. L. Minges, Int. J. Thermophysics 18 (1997) 1269,
/// from its polynomial. Published second hand.
pub fn resistivity() -> Vec<Resistivity> {
    rows("tungsten_resistivity.csv")
}

/// A row of [`total_emissivity`].
#[derive(Debug, Clone, Copy, Deserialize)]
pub struct TotalEmissivity {
    /// Temperature, kelvin.
    pub kelvin: f64,
    /// CRC Handbook.
    #[serde(rename = "emissivity_crc60")]
    pub crc: Option<f64>,
    /// Matsumoto and others.
    #[serde(rename = "emissivity_matsumoto_1999_iter_fit")]
    pub matsumoto: Option<f64>,
}

/// Total hemispherical emissivity of tungsten: CRC Handbook 60th ed. p. E-381; T. Matsumoto, A. Cezairliyan,
/// D. Basak, Int. J. Thermophysics 20 (1999) 943 joined to the ITER materials handbook. Published second hand.
pub fn total_emissivity() -> Vec<TotalEmissivity> {
    rows("tungsten_total_emissivity.csv")
}

/// A row of [`spectral_emissivity`].
#[derive(Debug, Clone, Copy, Deserialize)]
pub struct SpectralEmissivity {
    /// Wavelength, nanometre.
    pub nanometre: f64,
    /// At 1600 K.
    pub at_1600_kelvin: f64,
    /// At 2000 K.
    pub at_2000_kelvin: f64,
    /// At 2400 K.
    pub at_2400_kelvin: f64,
    /// At 2800 K.
    pub at_2800_kelvin: f64,
}

/// Spectral emissivity of tungsten: CRC Handbook 60th ed. p. E-381, measurements of J. C. De Vos, Physica 20
/// (1954) 690. Published second hand.
pub fn spectral_emissivity() -> Vec<SpectralEmissivity> {
    rows("tungsten_spectral_emissivity.csv")
}

/// A row of [`specific_heat`].
#[derive(Debug, Clone, Copy, Deserialize)]
pub struct SpecificHeat {
    /// Temperature, kelvin.
    pub kelvin: f64,
    /// JANAF, joule per mole and kelvin.
    #[serde(rename = "joule_per_mole_kelvin_janaf_1998")]
    pub janaf_molar: f64,
    /// White and Minges, joule per kilogram and kelvin.
    #[serde(rename = "joule_per_kilogram_kelvin_white_minges_1997")]
    pub white_minges: f64,
}

/// Heat capacity of tungsten: M. W. Chase, NIST-JANAF Thermochemical Tables, 4th ed. (1998); White and Minges
/// 1997. Published second hand.
pub fn specific_heat() -> Vec<SpecificHeat> {
    rows("tungsten_specific_heat.csv")
}

/// A row of [`cold_and_hot_resistance`].
#[derive(Debug, Clone, Deserialize)]
pub struct ColdAndHot {
    /// `gas` or `vacuum`.
    pub fill: String,
    /// Rated volts.
    pub volts: f64,
    /// Rated watts.
    pub watts: f64,
    /// Cold resistance, ohms.
    pub cold_ohms: f64,
    /// Resistance at the rating, ohms.
    pub hot_ohms: f64,
    /// Where from.
    pub citation: String,
}

/// Cold and hot resistance of lamps, the source in each row. Published second hand.
pub fn cold_and_hot_resistance() -> Vec<ColdAndHot> {
    rows("lamp_cold_and_hot_resistance.csv")
}

/// A row of [`filament_temperature`].
#[derive(Debug, Clone, Deserialize)]
pub struct FilamentTemperature {
    /// Rated volts.
    pub volts: f64,
    /// Rated watts.
    pub watts: f64,
    /// `gas` or `vacuum`.
    pub fill: String,
    /// Filament temperature at the rating.
    pub kelvin: f64,
    /// How far the row is to be trusted.
    pub status: String,
}

/// Filament temperatures at the rating, source and status in each row; those of the IES Lighting Handbook are from
/// memory.
pub fn filament_temperature() -> Vec<FilamentTemperature> {
    rows("lamp_filament_temperature.csv")
}

/// A row of [`flux_230`].
#[derive(Debug, Clone, Deserialize)]
pub struct Flux230 {
    /// Rated watts.
    pub watts: f64,
    /// Lumens.
    #[serde(rename = "lumens_ec_244_2009_halogen_equivalence")]
    pub lumens: f64,
    /// `published` or extrapolated.
    pub status: String,
}

/// Luminous flux of 230 V lamps by wattage: the claimed-equivalence table of Commission Regulation (EC) 244/2009.
/// Published; the 200 W row continues its slope.
pub fn flux_230() -> Vec<Flux230> {
    rows("lamp_luminous_flux_230v.csv")
}

/// A row of [`flux_120`].
#[derive(Debug, Clone, Copy, Deserialize)]
pub struct Flux120 {
    /// Rated watts.
    pub watts: f64,
    /// Energy-label equivalence (published).
    #[serde(rename = "lumens_energy_label_equivalence_published")]
    pub published: f64,
    /// Catalogue value (from memory).
    #[serde(rename = "lumens_catalogue_nominal_from_memory")]
    pub from_memory: f64,
}

/// Luminous flux of 120 V lamps by wattage: energy-label equivalence (published), catalogue values (from memory).
pub fn flux_120() -> Vec<Flux120> {
    rows("lamp_luminous_flux_120v.csv")
}

/// A row of [`measured_curves`].
#[derive(Debug, Clone, Deserialize)]
pub struct Measured {
    /// Which lamp.
    pub lamp: String,
    /// Volts.
    pub volts: f64,
    /// Amperes.
    pub amps: f64,
}

/// Measured volts and amperes: `small_2.5V_0.3A` from New Physics: Sae Mulli 73 (2023) 127, table 2 (published
/// second hand); `small_indicator_lamp` from open student laboratory data, its rating not stated.
pub fn measured_curves() -> Vec<Measured> {
    rows("lamp_measured_curves.csv")
}

/// A row of [`rating_exponents`].
#[derive(Debug, Clone, Deserialize)]
pub struct Exponent {
    /// What changes with voltage.
    #[serde(rename = "quantity_versus_voltage")]
    pub quantity: String,
    /// `gas`, `vacuum`, `halogen` or `any`.
    pub fill: String,
    /// Its exponent.
    pub exponent: f64,
    /// How far the row is to be trusted.
    pub status: String,
}

/// Exponents against voltage near the rating: D. G. Fink, H. W. Beaty, Standard Handbook for Electrical Engineers,
/// 11th ed. (1978) p. 22-8 (published second hand, fill `any`); IES Lighting Handbook (from memory, gas and vacuum).
pub fn rating_exponents() -> Vec<Exponent> {
    rows("lamp_rating_exponents.csv")
}

/// A row of [`observer`].
#[derive(Debug, Clone, Copy, Deserialize)]
pub struct Observer {
    /// Wavelength, nanometre.
    pub nanometre: f64,
    /// Colour-matching function x.
    pub xbar: f64,
    /// Colour-matching function y.
    pub ybar: f64,
    /// Colour-matching function z.
    pub zbar: f64,
}

/// CIE 1931 2-degree observer as shipped in the Python packages `colour-science` 0.4.7 and `luxpy` 1.12.5. Published second hand.
pub fn observer() -> Vec<Observer> {
    rows("cie1931_2deg.csv")
}

/// A row of [`planckian`].
#[derive(Debug, Clone, Copy, Deserialize)]
pub struct Planckian {
    /// Temperature, kelvin.
    pub kelvin: f64,
    /// Chromaticity x.
    pub x: f64,
    /// Chromaticity y.
    pub y: f64,
    /// Luminous efficacy of the radiation, lumen per watt.
    pub lumen_per_watt_of_radiation: f64,
}

/// Chromaticity and luminous efficacy of Planck radiators, computed from the exact SI constants and the observer at
/// 1 nm; equal to `luxpy` within 4e-6. Derived.
pub fn planckian() -> Vec<Planckian> {
    rows("planckian_chromaticity.csv")
}

/// A row of [`equipment_behaviour`].
#[derive(Debug, Clone, Deserialize)]
pub struct Behaviour {
    /// What it is about.
    pub item: String,
    /// Lower end; `-` where there is none.
    pub low: String,
    /// Upper end.
    pub high: String,
    /// How far the row is to be trusted.
    pub status: String,
}

/// What kinds of equipment do; status in each row.
pub fn equipment_behaviour() -> Vec<Behaviour> {
    rows("equipment_behaviour.csv")
}

/// A row of [`appliance_test`].
#[derive(Debug, Clone, Deserialize)]
pub struct ApplianceLimit {
    /// What is measured.
    pub quantity: String,
    /// Of which equipment.
    pub equipment: String,
    /// The limit, in `unit`.
    pub limit: f64,
    /// Its unit, written out.
    pub unit: String,
    /// `min`, `max`, or `add` for what a further length of lead adds.
    pub sense: String,
    /// How far the row is to be trusted.
    pub status: String,
}

/// Limits of EN 50678 / EN 50699, published second hand: check the standard and your local code.
pub fn appliance_test() -> Vec<ApplianceLimit> {
    rows("limits_appliance_test.csv")
}

/// A row of [`capacitor_discharge`].
#[derive(Debug, Clone, Deserialize)]
pub struct DischargeRow {
    /// The standard that it is quoted from.
    pub standard: String,
    /// Where it holds.
    pub condition: String,
    /// Volts.
    pub limit: f64,
    /// Seconds within which it holds.
    pub seconds: f64,
    /// How far the row is to be trusted.
    pub status: String,
}

/// Voltages of capacitors after switching off, and when the standards want them; status in each row.
pub fn capacitor_discharge() -> Vec<DischargeRow> {
    rows("limits_capacitor_discharge.csv")
}

/// A row of [`lamp_inrush`].
#[derive(Debug, Clone, Deserialize)]
pub struct Inrush {
    /// Rated volts, where the row is about one lamp.
    pub volts: Option<f64>,
    /// Rated watts.
    pub watts: Option<f64>,
    /// Least multiple of the rated current.
    pub multiple_of_rated_current_low: Option<f64>,
    /// Greatest.
    pub multiple_high: Option<f64>,
    /// What happens when, in words.
    pub time_note: String,
}

/// Inrush of lamps, the source in each row. Published second hand.
pub fn lamp_inrush() -> Vec<Inrush> {
    rows("lamp_inrush.csv")
}

/// A row of [`fuse_gates_iec`].
#[derive(Debug, Clone, Deserialize)]
pub struct IecGate {
    /// Sheet of IEC 60127-2.
    pub sheet: u8,
    /// Least rated current of the row.
    pub rated_amps_from: f64,
    /// Greatest.
    pub rated_amps_to: f64,
    /// Multiple of the rated current.
    pub multiple_of_rating: f64,
    /// It holds at least so long.
    pub prearcing_seconds_min: Option<f64>,
    /// It has opened after so long.
    pub prearcing_seconds_max: Option<f64>,
    /// How far the row is to be trusted.
    pub status: String,
}

/// Gates of IEC 60127-2 as data sheets declare them, status in each row.
pub fn fuse_gates_iec() -> Vec<IecGate> {
    rows("fuse_gates_iec60127_2.csv")
}

/// A row of [`fuse_gates_ul`].
#[derive(Debug, Clone, Deserialize)]
pub struct UlGate {
    /// Multiple of the rated current.
    pub multiple_of_rating: f64,
    /// Least rated current of the row.
    pub rated_amps_from: f64,
    /// Greatest.
    pub rated_amps_to: f64,
    /// What it must do.
    pub requirement: String,
    /// It holds at least so long.
    pub seconds_min: Option<f64>,
    /// It has opened after so long.
    pub seconds_max: Option<f64>,
    /// How far the row is to be trusted.
    pub status: String,
}

/// Gates of UL 248-14, status in each row.
pub fn fuse_gates_ul() -> Vec<UlGate> {
    rows("fuse_gates_ul248_14.csv")
}

/// A row of [`fuse_melting`].
#[derive(Debug, Clone, Copy, Deserialize)]
pub struct Melting {
    /// Rated current.
    pub rated_amps: f64,
    /// Melting heat, ampere squared seconds.
    pub melting_amp2_seconds: f64,
}

/// Melting heat of one maker's 5 x 20 mm time-lag series. Published second hand.
pub fn fuse_melting() -> Vec<Melting> {
    rows("fuse_time_lag_5x20_melting_i2t.csv")
}
