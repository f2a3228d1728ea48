//! The sheet: the document, its questions and their answers.
