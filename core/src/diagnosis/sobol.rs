//! Points that fill a cube evenly, the same ones every time.
//!
//! I. M. Sobol', USSR Computational Mathematics and Mathematical Physics 7 (1967) 86, with the direction numbers of
//! S. Joe and F. Y. Kuo, SIAM Journal on Scientific Computing 30 (2008) 2635, in the Gray-code order of I. A. Antonov
//! and V. M. Saleev, USSR Computational Mathematics and Mathematical Physics 19 (1979) 252. The first 256 points meet
//! each of 256 equal slices of each axis once.

/// How many axes there are numbers for.
pub const AXES: usize = 16;

/// Binary digits of a coordinate.
const DIGITS: usize = 32;

/// Degree of the primitive polynomial, its inner coefficients as a binary number, and the first direction numbers, for
/// every axis but the first (Joe and Kuo's table, rows 2 to 16).
const TABLE: [(usize, u32, [u32; 6]); AXES - 1] = [
    (1, 0, [1, 0, 0, 0, 0, 0]),
    (2, 1, [1, 3, 0, 0, 0, 0]),
    (3, 1, [1, 3, 1, 0, 0, 0]),
    (3, 2, [1, 1, 1, 0, 0, 0]),
    (4, 1, [1, 1, 3, 3, 0, 0]),
    (4, 4, [1, 3, 5, 13, 0, 0]),
    (5, 2, [1, 1, 5, 5, 17, 0]),
    (5, 4, [1, 1, 5, 5, 5, 0]),
    (5, 7, [1, 1, 7, 11, 19, 0]),
    (5, 11, [1, 1, 5, 1, 1, 0]),
    (5, 13, [1, 1, 1, 3, 11, 0]),
    (5, 14, [1, 3, 5, 5, 31, 0]),
    (6, 1, [1, 3, 3, 9, 7, 49]),
    (6, 13, [1, 1, 1, 15, 21, 21]),
    (6, 16, [1, 3, 1, 13, 27, 49]),
];

/// The sequence, with its direction numbers worked out.
#[derive(Debug, Clone)]
pub struct Sobol {
    directions: [[u32; DIGITS]; AXES],
}

impl Default for Sobol {
    fn default() -> Self {
        Self::new()
    }
}

impl Sobol {
    /// Works out the direction numbers.
    pub fn new() -> Self {
        let mut directions = [[0; DIGITS]; AXES];
        for (digit, direction) in directions[0].iter_mut().enumerate() {
            *direction = 1 << (DIGITS - 1 - digit);
        }
        for (axis, &(degree, coefficients, first)) in TABLE.iter().enumerate() {
            let row = &mut directions[axis + 1];
            for digit in 0..DIGITS {
                row[digit] = if digit < degree {
                    first[digit] << (DIGITS - 1 - digit)
                } else {
                    let mut value = row[digit - degree] ^ (row[digit - degree] >> degree);
                    for inner in 1..degree {
                        if coefficients >> (degree - 1 - inner) & 1 == 1 {
                            value ^= row[digit - inner];
                        }
                    }
                    value
                };
            }
        }
        Self { directions }
    }

    /// The point of an index, from 0; each coordinate is in `0..1`, and point 0 is the origin.
    pub fn point(&self, index: u32) -> [f64; AXES] {
        let gray = index ^ (index >> 1);
        core::array::from_fn(|axis| {
            let mut bits = 0;
            for (digit, direction) in self.directions[axis].iter().enumerate() {
                if gray >> digit & 1 == 1 {
                    bits ^= direction;
                }
            }
            f64::from(bits) / 4_294_967_296.0
        })
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn each_axis_has_one_point_in_each_slice() {
        let sobol = Sobol::new();
        for axis in 0..AXES {
            let mut met = [false; 256];
            for index in 0..256 {
                #[expect(
                    clippy::cast_possible_truncation,
                    clippy::cast_sign_loss,
                    reason = "a coordinate below one times 256"
                )]
                let slice = (sobol.point(index)[axis] * 256.0) as usize;
                assert!(!core::mem::replace(&mut met[slice], true), "axis {axis} twice in {slice}");
            }
        }
    }
}
