//! The two builds: the one that is shipped and the one for development.

/// Which build.
#[derive(Clone, Copy, PartialEq, Eq, Debug)]
pub enum Profile {
    /// Small and fast; what is shipped and measured.
    Full,
    /// Built in seconds and labelled so on the page.
    Quick,
}

impl Profile {
    /// The cargo profile, which is also the word on the page.
    pub fn name(self) -> &'static str {
        match self {
            Profile::Full => "full",
            Profile::Quick => "quick",
        }
    }
}
