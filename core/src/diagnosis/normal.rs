//! The normal and chi-square distributions, as far as a diagnosis needs them.

/// The value below which a standard normal variable lies with `probability` (0 to 1, ends excluded).
///
/// M. J. Wichura, algorithm AS 241, Applied Statistics 37 (1988) 477, the version of seven digits.
pub(crate) fn quantile(probability: f64) -> f64 {
    let q = probability - 0.5;
    if q.abs() <= 0.425 {
        let r = 0.180_625 - q * q;
        return q
            * (((5.910_937_472_0e1 * r + 1.592_911_320_2e2) * r + 5.043_427_193_8e1) * r + 3.387_132_717_9)
            / (((6.718_756_360_0e1 * r + 7.875_775_766_4e1) * r + 1.789_516_946_9e1) * r + 1.0);
    }
    let tail = if q < 0.0 { probability } else { 1.0 - probability };
    let r = libm::sqrt(-libm::log(tail.max(f64::MIN_POSITIVE)));
    let value = if r <= 5.0 {
        let r = r - 1.6;
        (((1.702_382_110_3e-1 * r + 1.306_728_481_6) * r + 2.756_815_390_0) * r + 1.423_437_277_7)
            / ((1.202_113_297_5e-1 * r + 7.370_016_425_0e-1) * r + 1.0)
    } else {
        let r = r - 5.0;
        (((1.733_720_399_7e-2 * r + 4.286_829_433_7e-1) * r + 3.081_226_386_0) * r + 6.657_905_115_0)
            / ((1.225_820_263_5e-2 * r + 2.419_789_422_5e-1) * r + 1.0)
    };
    if q < 0.0 { -value } else { value }
}

/// Probability that a chi-square variable exceeds `value`, by the cube root of E. B. Wilson and M. M. Hilferty,
/// Proceedings of the National Academy of Sciences 17 (1931) 684; 1 for no degrees of freedom.
pub(crate) fn chi_square_tail(value: f64, degrees: f64) -> f64 {
    if degrees <= 0.0 {
        return 1.0;
    }
    let spread = 2.0 / (9.0 * degrees);
    let z = (libm::cbrt(value.max(0.0) / degrees) - (1.0 - spread)) / libm::sqrt(spread);
    0.5 * libm::erfc(z * core::f64::consts::FRAC_1_SQRT_2)
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn quantiles_are_those_of_the_tables() {
        for (probability, z) in
            [(0.5, 0.0), (0.975, 1.959_964), (0.025, -1.959_964), (0.999, 3.090_232), (1e-12, -7.034_484)]
        {
            assert!((quantile(probability) - z).abs() < 2e-6, "{probability}: {}", quantile(probability));
        }
    }

    #[test]
    fn tails_are_those_of_the_tables() {
        // Critical values at 5 %, 1 % and 0.1 % (any table); the approximation is good to a few per cent of the tail.
        for (value, degrees, tail) in [(3.841, 1.0, 0.05), (9.210, 2.0, 0.01), (16.266, 3.0, 0.001)] {
            assert!((chi_square_tail(value, degrees) / tail - 1.0).abs() < 0.15);
        }
    }
}
