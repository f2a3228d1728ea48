//! LS, jj and jK coupling; Hund; Landé.
