//! Linear algebra modulo a prime, written for the check alone.

/// The Mersenne prime by which ranks are computed.
pub(super) const RANK_PRIME: u64 = (1 << 61) - 1;

fn product_modulo(a: u64, b: u64, prime: u64) -> u64 {
    (u128::from(a) * u128::from(b) % u128::from(prime)) as u64
}

/// `a/b`, by Fermat; 0 if `b` is 0.
pub(super) fn quotient_modulo(a: u64, b: u64, prime: u64) -> u64 {
    let (mut base, mut exponent, mut result) = (b, prime - 2, a);
    while exponent > 0 {
        if exponent & 1 == 1 {
            result = product_modulo(result, base, prime);
        }
        base = product_modulo(base, base, prime);
        exponent >>= 1;
    }
    result
}

/// The rank of the rows, by plain elimination modulo a prime, written for the check alone.
pub(super) fn rank_modulo(rows: impl Iterator<Item = Vec<u64>>, prime: u64) -> usize {
    // Reduced rows with the place of their leading 1.
    let mut basis: Vec<(usize, Vec<u64>)> = Vec::new();
    for mut row in rows {
        for (pivot, known) in &basis {
            let factor = row[*pivot];
            if factor != 0 {
                for (target, value) in row.iter_mut().zip(known) {
                    let negative = prime - product_modulo(factor, *value, prime);
                    *target =
                        ((u128::from(*target) + u128::from(negative)) % u128::from(prime)) as u64;
                }
            }
        }
        if basis.len() == row.len() {
            break;
        }
        if let Some(pivot) = row.iter().position(|&value| value != 0) {
            let leading = row[pivot];
            row.iter_mut()
                .for_each(|value| *value = quotient_modulo(*value, leading, prime));
            basis.push((pivot, row));
        }
    }
    basis.len()
}
