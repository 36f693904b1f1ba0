//! Why a calculation gave no number.

use std::fmt;

use super::key::Key;
use crate::water::range::OutOfRange;
use crate::water::units::UnknownUnit;

/// Why a calculation gave no number.
#[derive(Debug, Clone)]
pub enum Failure {
    /// There is no such calculation.
    UnknownName {
        /// As it was written.
        name: String,
        /// What may have been meant.
        like: Vec<&'static str>,
    },
    /// The calculation has no such key.
    UnknownKey {
        /// The calculation.
        name: &'static str,
        /// As it was written.
        key: String,
        /// What was probably meant.
        nearest: Option<&'static str>,
        /// The keys there are.
        takes: Vec<&'static str>,
    },
    /// An argument that is not `key=value`.
    NotAnInput {
        /// As it was written.
        text: String,
    },
    /// A key given more than once.
    Twice {
        /// The key.
        key: &'static str,
    },
    /// Two keys that say the same.
    Rivals {
        /// One.
        one: &'static str,
        /// The other.
        other: &'static str,
    },
    /// Keys that have to be given.
    Missing {
        /// The calculation.
        name: &'static str,
        /// The keys.
        keys: Vec<&'static Key>,
    },
    /// A value that is not a number.
    NotANumber {
        /// The key.
        key: &'static str,
        /// As it was written.
        text: String,
    },
    /// A value that is not one of the words.
    NotAWord {
        /// The key.
        key: &'static str,
        /// As it was written.
        text: String,
        /// The words there are.
        takes: &'static [&'static str],
    },
    /// A unit that the key can't be given in.
    Unit(UnknownUnit),
    /// A value that the formula does not hold for.
    OutOfRange(OutOfRange),
    /// The numbers are in range and still give none, such as a division by a zero that they come to.
    NoNumber {
        /// The calculation.
        name: &'static str,
    },
    /// The calculation reads a key that it does not declare; the checks of this project keep that from happening.
    Undeclared {
        /// The key.
        key: &'static str,
    },
}

impl Failure {
    /// Exit status: 3 where a value can't be used, 2 where the words were wrong.
    pub fn exit_status(&self) -> u8 {
        match self {
            Self::OutOfRange(_) | Self::NoNumber { .. } => 3,
            _ => 2,
        }
    }
}

impl From<OutOfRange> for Failure {
    fn from(error: OutOfRange) -> Self {
        Self::OutOfRange(error)
    }
}

impl From<UnknownUnit> for Failure {
    fn from(error: UnknownUnit) -> Self {
        Self::Unit(error)
    }
}

impl std::error::Error for Failure {}

/// "did you mean `x`?" or something else to do.
fn or_else(nearest: Option<&str>, otherwise: &str) -> String {
    nearest.map_or_else(|| otherwise.to_owned(), |n| format!("did you mean `{n}`?"))
}

impl fmt::Display for Failure {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        match self {
            Self::UnknownName { name, like } => {
                let cure = match like.as_slice() {
                    [] => "`gillside water` alone lists what there is".to_owned(),
                    [one] => format!("did you mean `{one}`?"),
                    some => format!("did you mean one of {}?", some.join(", ")),
                };
                write!(f, "there is no calculation `{name}`; {cure}")
            }
            Self::UnknownKey {
                name,
                key,
                nearest,
                takes,
            } => {
                let all = match takes.as_slice() {
                    [] => "it takes none".to_owned(),
                    keys => format!("it takes {}", keys.join(", ")),
                };
                write!(
                    f,
                    "`{name}` has no key `{key}`; {}",
                    or_else(*nearest, &all)
                )
            }
            Self::NotAnInput { text } => {
                write!(
                    f,
                    "`{text}` is not key=value; write it like `temperature=24`"
                )
            }
            Self::Twice { key } => write!(f, "`{key}` is given twice; give it once"),
            Self::Rivals { one, other } => {
                write!(
                    f,
                    "`{one}` and `{other}` say the same thing; give one of them"
                )
            }
            Self::Missing { name, keys } => {
                write!(f, "`{name}` also needs")?;
                for key in keys {
                    write!(f, "\n  {}: {}; {}", key.name, key.help, key.takes())?;
                }
                Ok(())
            }
            Self::NotANumber { key, text } => write!(
                f,
                "`{key}` is `{text}`, which is not a number; write it like `7.1`, with a point"
            ),
            Self::NotAWord { key, text, takes } => {
                let nearest = crate::fault::nearest(text, takes.iter().copied());
                let all = format!("it takes {}", takes.join(", "));
                write!(f, "`{key}` can't be `{text}`; {}", or_else(nearest, &all))
            }
            Self::Unit(error) => error.fmt(f),
            Self::OutOfRange(error) => error.fmt(f),
            Self::NoNumber { name } => write!(
                f,
                "`{name}` gives no number for these values; check that none is zero that should not be"
            ),
            Self::Undeclared { key } => {
                write!(
                    f,
                    "`{key}` is read but not declared; this is a fault of the program"
                )
            }
        }
    }
}
