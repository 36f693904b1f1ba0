//! The small parts of a site.

use jiff::civil::Time;

use super::column::Meaning;

/// Declares an enum whose variants are words of the site file, with the words in one place.
macro_rules! words {
    ($(#[$doc:meta])* $name:ident { $($(#[$vdoc:meta])* $variant:ident = $word:literal),+ $(,)? }) => {
        $(#[$doc])*
        #[derive(Debug, Clone, Copy, PartialEq, Eq, Hash)]
        pub enum $name { $($(#[$vdoc])* $variant),+ }

        impl $name {
            /// Every word, in the order of the contract.
            pub const WORDS: &'static [&'static str] = &[$($word),+];

            /// The value of a word.
            pub fn of(word: &str) -> Option<Self> {
                match word {
                    $($word => Some(Self::$variant),)+
                    _ => None,
                }
            }

            /// The word of the site file.
            pub fn word(self) -> &'static str {
                match self { $(Self::$variant => $word),+ }
            }
        }
    };
}

words! {
    /// The units that people see.
    Units {
        /// Celsius, liters, kilograms.
        Metric = "metric",
        /// Fahrenheit, gallons, pounds.
        Us = "us",
    }
}

words! {
    /// A kind of crop.
    Crop {
        /// Lettuce and the like.
        LeafyGreens = "leafy-greens",
        /// Basil and the like.
        Herbs = "herbs",
        /// Tomato and the like.
        Fruiting = "fruiting",
    }
}

words! {
    /// What the makeup water is disinfected with.
    Chlorination {
        /// Known to have none.
        None = "none",
        /// Free chlorine.
        Chlorine = "chlorine",
        /// Chlorine bound to ammonia.
        Chloramine = "chloramine",
        /// The file says that nobody knows.
        Unknown = "unknown",
    }
}

words! {
    /// What a place is.
    PlaceKind {
        /// Holds fish.
        Tank = "tank",
        /// Where the water collects.
        Sump = "sump",
        /// Takes solids out.
        SolidsFilter = "solids-filter",
        /// Holds the nitrifying bacteria.
        Biofilter = "biofilter",
        /// A media bed with plants.
        Bed = "bed",
        /// Plants floating on water.
        Raft = "raft",
        /// Plants in upright columns.
        Tower = "tower",
        /// Takes gas out.
        Degasser = "degasser",
        /// Feed and supplies.
        Store = "store",
    }
}

/// The water the system is topped up with. `None` is unknown.
#[derive(Debug, Clone, Default, PartialEq)]
pub struct Makeup {
    /// What it is disinfected with.
    pub chlorination: Option<Chlorination>,
    /// pH.
    pub ph: Option<f64>,
    /// Total alkalinity, mg/L as CaCO3.
    pub alkalinity: Option<f64>,
    /// Chloride, mg/L.
    pub chloride: Option<f64>,
    /// Temperature, C.
    pub temperature: Option<f64>,
}

/// A volume of one kind of media.
#[derive(Debug, Clone, PartialEq)]
pub struct Media {
    /// A kind of the media table.
    pub kind: String,
    /// Liters of media, its gaps included, above 0.
    pub volume_l: f64,
}

/// A comfort band, in the reading's own unit; at least one end is there.
#[derive(Debug, Clone, Copy, Default, PartialEq)]
pub struct Band {
    /// Lower end.
    pub low: Option<f64>,
    /// Upper end.
    pub high: Option<f64>,
}

/// A name that the logger gives to a column, and what it means.
#[derive(Debug, Clone, PartialEq)]
pub struct Heading {
    /// As it stands at the head of the log.
    pub heading: String,
    /// What the column holds.
    pub meaning: Meaning,
}

/// A working shift, in the site's local time.
#[derive(Debug, Clone, PartialEq)]
pub struct Shift {
    /// What it is called.
    pub name: String,
    /// When it begins.
    pub start: Time,
    /// When it ends; not after `start` when it ends the next day.
    pub end: Time,
}

impl Shift {
    /// Whether it ends on the day after it began. The same start and end is a whole day.
    pub fn crosses_midnight(&self) -> bool {
        self.end <= self.start
    }

    /// How long it is, in seconds.
    pub fn length(&self) -> i64 {
        const DAY: i64 = 86_400;
        let second = |t: Time| {
            i64::from(t.hour()) * 3600 + i64::from(t.minute()) * 60 + i64::from(t.second())
        };
        let between = second(self.end) - second(self.start);
        if self.crosses_midnight() {
            between + DAY
        } else {
            between
        }
    }

    /// Whether a time of day is in the shift: from its start, up to but not at its end.
    pub fn covers(&self, time: Time) -> bool {
        if self.crosses_midnight() {
            time >= self.start || time < self.end
        } else {
            time >= self.start && time < self.end
        }
    }
}

/// A place, as rows of the log name it.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct Place {
    /// The name in the log's `place` column.
    pub name: String,
    /// What it is, where the file says.
    pub kind: Option<PlaceKind>,
}

/// Somebody to call.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct Phone {
    /// Who it is.
    pub who: String,
    /// The number as it is dialed.
    pub number: String,
}

/// What there is to work with. `None` is unknown.
#[derive(Debug, Clone, Default, PartialEq, Eq)]
pub struct Equipment {
    /// A filter that takes solids out.
    pub solids_filter: Option<bool>,
    /// Air that can be had when the usual aeration is off.
    pub standby_air: Option<bool>,
    /// Bottled or generated oxygen.
    pub pure_oxygen: Option<bool>,
    /// Power when the mains are off.
    pub backup_power: Option<bool>,
    /// Substances on the shelf; `None` when the file doesn't say, empty when there are none.
    pub substances: Option<Vec<String>>,
}
