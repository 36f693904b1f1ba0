//! A plan, as plain values: everything a page or a script needs, and nothing of how it is shown.

/// What is put right.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Kind {
    /// pH, up or down.
    Ph,
    /// Alkalinity, up.
    Alkalinity,
    /// Temperature, up or down.
    Temperature,
    /// Any reading, by water exchange.
    Exchange,
    /// Chloride, against nitrite.
    Chloride,
    /// Feed, cut and restarted.
    Feed,
    /// Chlorine or chloramine, taken out.
    Dechlorinate,
    /// Oxygen, at once.
    Oxygen,
    /// A new or dead filter.
    StartUp,
    /// Iron, potassium, calcium, magnesium for plants.
    Supplement,
}

impl Kind {
    /// All, with the words of the command.
    pub const ALL: [(&'static str, Self); 10] = [
        ("ph", Self::Ph),
        ("alkalinity", Self::Alkalinity),
        ("temperature", Self::Temperature),
        ("exchange", Self::Exchange),
        ("chloride", Self::Chloride),
        ("feed", Self::Feed),
        ("dechlorinate", Self::Dechlorinate),
        ("oxygen", Self::Oxygen),
        ("start-up", Self::StartUp),
        ("supplement", Self::Supplement),
    ];

    /// The word of the command.
    pub fn word(self) -> &'static str {
        Self::ALL
            .iter()
            .find(|(_, k)| *k == self)
            .map_or("", |(w, _)| w)
    }

    /// From the word of the command.
    pub fn of(word: &str) -> Option<Self> {
        Self::ALL.iter().find(|(w, _)| *w == word).map(|(_, k)| *k)
    }
}

/// What is asked for.
#[derive(Debug, Clone, PartialEq)]
pub struct Wish {
    /// What is put right.
    pub kind: Kind,
    /// Where to, in the unit of the reading; a planner has its own aim where nothing is said.
    pub to: Option<f64>,
    /// The substance, by formula or name.
    pub substance: Option<String>,
    /// How pure it is, percent (0-100).
    pub purity: f64,
    /// The reading that an exchange or a supplement is about.
    pub reading: Option<String>,
    /// That reading in the new water.
    pub in_makeup: Option<f64>,
    /// Liters that are treated, where it is not the whole water.
    pub liters: Option<f64>,
    /// The new water's total chlorine was measured: there is none.
    pub dechlorinated: bool,
    /// A start-up with fish in the water.
    pub with_fish: bool,
}

impl Wish {
    /// A wish with nothing said but its kind.
    pub fn new(kind: Kind) -> Self {
        Self {
            kind,
            to: None,
            substance: None,
            purity: 100.0,
            reading: None,
            in_makeup: None,
            liters: None,
            dechlorinated: false,
            with_fish: false,
        }
    }
}

/// So much of a substance.
#[derive(Debug, Clone, PartialEq)]
pub struct Amount {
    /// Its formula.
    pub substance: String,
    /// What people call it.
    pub name: String,
    /// Grams as weighed.
    pub grams: f64,
    /// Grams of the pure substance in them.
    pub pure: f64,
    /// Milliliters, where it is sold as a liquid.
    pub milliliters: Option<f64>,
}

/// The reading expected after a step.
#[derive(Debug, Clone, PartialEq)]
pub struct Expect {
    /// Reading id.
    pub id: String,
    /// At the least.
    pub low: f64,
    /// At the most.
    pub high: f64,
}

/// A temperature to go to.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Warmth {
    /// C.
    pub to: f64,
    /// C by which it changes.
    pub by: f64,
    /// C an hour at the most.
    pub per_hour: f64,
}

/// One thing to do.
#[derive(Debug, Clone, Default, PartialEq)]
pub struct Step {
    /// Unix seconds.
    pub at: i64,
    /// What to do, a sentence or two.
    pub text: String,
    /// What to add.
    pub amounts: Vec<Amount>,
    /// Liters to change.
    pub liters: Option<f64>,
    /// Kilograms to feed a day from now on.
    pub feed_kg: Option<f64>,
    /// The temperature to go to.
    pub warmth: Option<Warmth>,
    /// What is expected after it.
    pub expect: Vec<Expect>,
    /// Conditions to go on.
    pub go_on_if: Vec<String>,
    /// Conditions to stop.
    pub stop_if: Vec<String>,
}

/// A limit the plan kept to.
#[derive(Debug, Clone, PartialEq)]
pub struct Kept {
    /// Id.
    pub id: String,
    /// What it is, a clause.
    pub name: String,
    /// The limit.
    pub limit: f64,
    /// The worst value over the whole plan.
    pub reached: f64,
    /// What it would come to if nothing were done, where that passes the limit too.
    pub without: Option<f64>,
    /// Unit.
    pub unit: String,
    /// Keys of sources.
    pub source: Vec<String>,
    /// What other sources say.
    pub contested: String,
    /// No publication stands behind it.
    pub unpublished: bool,
    /// It is a floor: `reached` is the lowest value.
    pub is_floor: bool,
    /// It is this one that set the pace.
    pub set_the_pace: bool,
}

/// Why there is no plan.
#[derive(Debug, Clone, PartialEq)]
pub struct Refused {
    /// Id of the limit that would be broken.
    pub limit: String,
    /// Which, when, by how much.
    pub reason: String,
    /// What to do instead.
    pub instead: String,
}

/// A plan.
#[derive(Debug, Clone, PartialEq)]
pub struct Plan {
    /// Its kind.
    pub kind: Kind,
    /// Readings it starts from.
    pub from: Vec<(String, f64)>,
    /// Readings it aims at.
    pub to: Vec<(String, f64)>,
    /// Why there are no steps, where there is a reason.
    pub refused: Option<Refused>,
    /// What to do, in the order of time.
    pub steps: Vec<Step>,
    /// All that is added.
    pub total: Vec<Amount>,
    /// Limits kept.
    pub limits: Vec<Kept>,
    /// What to mind.
    pub cautions: Vec<String>,
    /// What else is good to know: demand and supply, what was taken for granted.
    pub notes: Vec<String>,
}

impl Plan {
    /// An empty plan.
    pub fn new(kind: Kind) -> Self {
        Self {
            kind,
            from: Vec::new(),
            to: Vec::new(),
            refused: None,
            steps: Vec::new(),
            total: Vec::new(),
            limits: Vec::new(),
            cautions: Vec::new(),
            notes: Vec::new(),
        }
    }

    /// The same, refused: no steps, no total.
    #[must_use]
    pub fn refuse(self, refused: Refused) -> Self {
        Self {
            steps: Vec::new(),
            total: Vec::new(),
            refused: Some(refused),
            ..self
        }
    }

    /// Sums what the steps add.
    pub fn add_up(&mut self) {
        self.total.clear();
        for amount in self.steps.iter().flat_map(|s| &s.amounts) {
            match self
                .total
                .iter_mut()
                .find(|a| a.substance == amount.substance)
            {
                Some(sum) => {
                    sum.grams += amount.grams;
                    sum.pure += amount.pure;
                    sum.milliliters = sum.milliliters.zip(amount.milliliters).map(|(a, b)| a + b);
                }
                None => self.total.push(amount.clone()),
            }
        }
    }
}

/// Why no plan can be thought about.
#[derive(Debug, Clone, PartialEq, Eq)]
pub enum Trouble {
    /// Readings or keys of the site file that are not known.
    Lacks(Vec<String>),
    /// The wish can't be meant so: what is wrong, and what to do.
    Usage(String),
}

impl std::fmt::Display for Trouble {
    fn fmt(&self, f: &mut std::fmt::Formatter<'_>) -> std::fmt::Result {
        match self {
            Self::Lacks(ids) => write!(
                f,
                "this plan needs {}; put it in the log or the site file, or give it with --given {}=VALUE",
                ids.iter()
                    .map(|i| format!("`{i}`"))
                    .collect::<Vec<_>>()
                    .join(", "),
                ids.first().map_or("ID", String::as_str)
            ),
            Self::Usage(text) => f.write_str(text),
        }
    }
}

impl std::error::Error for Trouble {}

impl From<super::super::projection::Lacks> for Trouble {
    fn from(lacks: super::super::projection::Lacks) -> Self {
        Self::Lacks(lacks.0)
    }
}
