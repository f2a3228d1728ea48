//! The tests are in `same_bytes.rs`; what they compare with is made natively by `native_answers.rs`.
