//! The refractive index of air.
//!
//! Ciddor, Appl. Opt. 35, 1566 (1996): with σ = 1/λ in µm⁻¹, λ in vacuum,
//!
//! 10⁸(n_as − 1) = 5792105/(238.0185 − σ²) + 167917/(57.362 − σ²): dry air, 15 °C, 101 325 Pa,
//! 450 ppm CO₂ (eq. 1);
//! n_axs − 1 = (n_as − 1)[1 + 0.534·10⁻⁶(x_c − 450)]: another share x_c of CO₂ in ppm (eq. 2);
//! 10⁸(n_ws − 1) = 1.022(295.235 + 2.6422σ² − 0.032380σ⁴ + 0.004028σ⁶): water vapour, 20 °C, 1333 Pa
//! (eq. 3);
//! n − 1 = (ρ_a/ρ_axs)(n_axs − 1) + (ρ_w/ρ_ws)(n_ws − 1) (eq. 5): with the densities of the two gases
//! by the compressibility of moist air (his eqs. 4 and 12; Davis, Metrologia 29, 67 (1992)).
//!
//! His estimate of the uncertainty is 2–5·10⁻⁸ of n for 350–650 nm and everyday air.

use crate::problem::Problem;

/// Wavelengths in vacuum, nm, for which an index of air is given: the custom of tables, which have
/// wavelengths in air between 200 nm and some upper end; 1700 nm is that of the formula.
pub const SHORTEST: f64 = 200.0;
/// The upper end of [`SHORTEST`].
pub const LONGEST: f64 = 1700.0;

/// Bounds of what the formula is used for: temperature in °C, pressure in Pa, CO₂ in ppm.
const TEMPERATURES: (f64, f64) = (-40.0, 100.0);
const PRESSURES: (f64, f64) = (0.0, 140_000.0);
const CARBON_DIOXIDE: (f64, f64) = (0.0, 10_000.0);

/// 0 °C in K.
const FREEZING: f64 = 273.15;
/// Molar gas constant of the formula, J/(mol K): CODATA 1986, as its author used it.
const GAS_CONSTANT: f64 = 8.314510;
/// Molar mass of water, kg/mol.
const WATER: f64 = 0.018015;

/// Air of a laboratory.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Air {
    temperature: f64,
    pressure: f64,
    humidity: f64,
    carbon_dioxide: f64,
    /// Densities of dry air and of vapour over those of the formula's standard gases.
    dry: f64,
    vapour: f64,
}

impl Air {
    /// Standard air: dry, 15 °C, 101 325 Pa, 450 ppm CO₂.
    pub const STANDARD: Air = Air {
        temperature: 15.0,
        pressure: 101_325.0,
        humidity: 0.0,
        carbon_dioxide: 450.0,
        dry: 1.0,
        vapour: 0.0,
    };

    /// Air at a temperature in °C and a pressure in Pa, with its relative humidity (1 is saturated)
    /// and its share of CO₂ in ppm.
    ///
    /// # Errors
    /// `air-temperature-out-of-range` outside −40 … 100 °C, `air-pressure-out-of-range` outside
    /// 0 … 140 kPa, `air-humidity-out-of-range` outside 0 … 1 and where the vapour alone would have
    /// more than the whole pressure, `air-carbon-dioxide-out-of-range` outside 0 … 10 000 ppm.
    pub fn new(
        temperature: f64,
        pressure: f64,
        humidity: f64,
        carbon_dioxide: f64,
    ) -> Result<Air, Problem> {
        let within = |value: f64, (low, high): (f64, f64)| value >= low && value <= high;
        if !within(temperature, TEMPERATURES) {
            return Err(out_of_range(
                "air-temperature-out-of-range",
                format!(
                    "Air of {temperature} °C is outside what its refractive index is known for."
                ),
                "between -40 and 100 °C",
            ));
        }
        if !within(pressure, PRESSURES) {
            return Err(out_of_range(
                "air-pressure-out-of-range",
                format!("Air of {pressure} Pa is outside what its refractive index is known for."),
                "between 0 and 140000 Pa",
            ));
        }
        if !within(humidity, (0.0, 1.0)) {
            return Err(out_of_range(
                "air-humidity-out-of-range",
                format!(
                    "A relative humidity of {} % is not possible.",
                    100.0 * humidity
                ),
                "between 0 and 100 %",
            ));
        }
        if !within(carbon_dioxide, CARBON_DIOXIDE) {
            return Err(out_of_range(
                "air-carbon-dioxide-out-of-range",
                format!("{carbon_dioxide} ppm CO2 is outside what the index of air is known for."),
                "between 0 and 10000 ppm",
            ));
        }
        let kelvin = temperature + FREEZING;
        let vapour_pressure = humidity * enhancement(temperature, pressure) * saturation(kelvin);
        let share = if vapour_pressure > 0.0 {
            vapour_pressure / pressure
        } else {
            0.0
        };
        if !within(share, (0.0, 1.0)) {
            return Err(out_of_range(
                "air-humidity-out-of-range",
                format!(
                    "Air of {} % relative humidity and {temperature} °C holds more vapour than {pressure} Pa.",
                    100.0 * humidity
                ),
                "the pressure of the vapour is at most that of the air",
            ));
        }
        let molar = 1e-3 * (28.9635 + 12.011e-6 * (carbon_dioxide - 400.0));
        let moles = |kelvin: f64, pressure: f64, share: f64| {
            pressure / (compressibility(kelvin, pressure, share) * GAS_CONSTANT * kelvin)
        };
        let here = moles(kelvin, pressure, share);
        let standard_dry = moles(288.15, 101_325.0, 0.0) * molar;
        let standard_vapour = moles(293.15, 1333.0, 1.0) * WATER;
        Ok(Air {
            temperature,
            pressure,
            humidity,
            carbon_dioxide,
            dry: here * molar * (1.0 - share) / standard_dry,
            vapour: here * WATER * share / standard_vapour,
        })
    }

    /// Temperature, °C.
    #[must_use]
    pub fn temperature(&self) -> f64 {
        self.temperature
    }

    /// Pressure, Pa.
    #[must_use]
    pub fn pressure(&self) -> f64 {
        self.pressure
    }

    /// Relative humidity, 1 for saturated air.
    #[must_use]
    pub fn humidity(&self) -> f64 {
        self.humidity
    }

    /// CO₂, ppm.
    #[must_use]
    pub fn carbon_dioxide(&self) -> f64 {
        self.carbon_dioxide
    }

    /// n − 1 at a wavelength in vacuum, nm; nothing outside [`SHORTEST`] … [`LONGEST`].
    ///
    /// The formula of the module's head. Agrees with other implementations of it to 1e-13 for
    /// standard air and 1e-10 for moist air, where some take another formula for the pressure of saturated vapour.
    #[must_use]
    pub fn refractivity(&self, vacuum_nm: f64) -> Option<f64> {
        if !(SHORTEST..=LONGEST).contains(&vacuum_nm) {
            return None;
        }
        let inverse = 1e3 / vacuum_nm;
        let s = inverse * inverse;
        let standard = 1e-8 * (5_792_105.0 / (238.0185 - s) + 167_917.0 / (57.362 - s));
        let dry = standard * (1.0 + 0.534e-6 * (self.carbon_dioxide - 450.0));
        let vapour = 1e-8 * 1.022 * (295.235 + s * (2.6422 + s * (-0.032380 + s * 0.004028)));
        Some(self.dry * dry + self.vapour * vapour)
    }
}

/// Pressure of saturated vapour over water, Pa, over ice below 0 °C (Ciddor 1996, app. A; Davis 1992).
fn saturation(kelvin: f64) -> f64 {
    if kelvin < FREEZING {
        return libm::exp10(-2663.5 / kelvin + 12.537);
    }
    let power = kelvin * (kelvin * 1.237_884_7e-5 - 1.912_131_6e-2) + 33.937_110_47;
    libm::exp(power - 6.343_164_5e3 / kelvin)
}

/// How much more vapour air takes up than a vacuum (Davis 1992, eq. 11).
fn enhancement(celsius: f64, pressure: f64) -> f64 {
    1.000_62 + 3.14e-8 * pressure + 5.6e-7 * celsius * celsius
}

/// Z = pV/RT of moist air with the mole share x of vapour (Ciddor 1996, eq. 12; Davis 1992, eq. 13).
fn compressibility(kelvin: f64, pressure: f64, x: f64) -> f64 {
    let t = kelvin - FREEZING;
    let ratio = pressure / kelvin;
    let pairs = 1.581_23e-6 - 2.9331e-8 * t
        + 1.1043e-10 * t * t
        + (5.707e-6 - 2.051e-8 * t) * x
        + (1.9898e-4 - 2.376e-6 * t) * x * x;
    1.0 - ratio * pairs + ratio * ratio * (1.83e-11 - 0.765e-8 * x * x)
}

#[inline(never)]
fn out_of_range(code: &'static str, message: String, bound: &str) -> Problem {
    Problem::new(code, message, 0, 0).bound(bound)
}
