//! What is computed at most.

/// Subshells in the common list, closed and empty ones included.
pub const MOST_SUBSHELLS: usize = 32;

/// Configurations of one parity.
pub const MOST_CONFIGURATIONS: usize = 64;

/// ℓ of an electron: n ≤ 50.
pub const MOST_L: u8 = 49;

/// LS-coupled states of one parity, not counting J and M.
pub const MOST_LS_STATES: u64 = 60_000;

/// Rows of a matrix of one J that is diagonalised in full.
pub const MOST_ROWS: u64 = 3000;

/// LS-coupled states up to which they are counted.
pub const MOST_COUNTED: u64 = 100_000_000;

/// Products that make electrostatic coefficients: some ten seconds.
pub const MOST_PRODUCTS: u64 = 3_000_000_000;
