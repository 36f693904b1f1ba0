//! What is asked for a site file: the key, the question, and what the answer is good for.

/// How an answer is written into the file.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub(super) enum Form {
    /// A text in quotes.
    Text,
    /// A text of which the rule base or the program has a list.
    Listed(&'static str),
    /// A number.
    Number,
    /// Yes or no.
    Flag,
    /// A day.
    Date,
}

/// One question.
#[derive(Debug, Clone, Copy)]
pub(super) struct Question {
    /// The key, with its table before a dot.
    pub key: &'static str,
    /// What is asked.
    pub ask: &'static str,
    /// What it is good for.
    pub why: &'static str,
    /// How the answer is written.
    pub form: Form,
    /// What most answer.
    pub usual: &'static str,
}

const fn q(
    key: &'static str,
    form: Form,
    usual: &'static str,
    ask: &'static str,
    why: &'static str,
) -> Question {
    Question {
        key,
        ask,
        why,
        form,
        usual,
    }
}

/// The questions, in the order they are asked.
pub(super) const QUESTIONS: [Question; 27] = [
    q(
        "name",
        Form::Text,
        "",
        "What is the farm called?",
        "stands on every page",
    ),
    q(
        "timezone",
        Form::Text,
        "UTC",
        "Time zone, such as Europe/Lisbon or America/Chicago?",
        "times in the log are read in it",
    ),
    q(
        "units",
        Form::Listed("units"),
        "metric",
        "Units: metric or us?",
        "what you see on pages",
    ),
    q(
        "species",
        Form::Listed("species"),
        "",
        "Which fish?",
        "their limits; without it the strictest limits of all hold",
    ),
    q(
        "started",
        Form::Date,
        "",
        "When was the system first fed (YYYY-MM-DD)?",
        "a young biofilter is judged otherwise",
    ),
    q(
        "volume_l",
        Form::Number,
        "",
        "Liters of water that circulate, all together?",
        "doses, loads, and how long the air lasts when the pump stops",
    ),
    q(
        "biomass_kg",
        Form::Number,
        "",
        "Kilograms of fish?",
        "how long the air lasts, and the load on the filter",
    ),
    q(
        "feed_kg_per_day",
        Form::Number,
        "",
        "Kilograms of feed on an ordinary day?",
        "how much ammonia there is to turn over",
    ),
    q(
        "feed_protein_percent",
        Form::Number,
        "",
        "Percent protein of the feed?",
        "the same",
    ),
    q(
        "biofilter_area_m2",
        Form::Number,
        "",
        "Square meters that bacteria can live on in the biofilter, if you know?",
        "whether the filter is large enough",
    ),
    q(
        "plant_area_m2",
        Form::Number,
        "",
        "Square meters of plants (0: none)?",
        "plant rounds, and feed per area",
    ),
    q(
        "crops",
        Form::Listed("crops"),
        "",
        "What grows: leafy-greens, herbs, fruiting?",
        "what plants ask for",
    ),
    q(
        "elevation_m",
        Form::Number,
        "",
        "Meters above the sea?",
        "how much oxygen water can hold",
    ),
    q(
        "aeration_kg_o2_per_day",
        Form::Number,
        "",
        "Kilograms of oxygen a day that the aeration puts in, if you know?",
        "whether there is air enough",
    ),
    q(
        "heated",
        Form::Flag,
        "",
        "Is the water heated (yes/no)?",
        "rounds before frost, and what to do when heat fails",
    ),
    q(
        "covered_media",
        Form::Flag,
        "",
        "Is the filter media covered from light (yes/no)?",
        "light slows the bacteria",
    ),
    q(
        "makeup.chlorination",
        Form::Listed("chlorination"),
        "unknown",
        "Is the water you top up with disinfected: none, chlorine, chloramine, unknown?",
        "fish and bacteria die of it",
    ),
    q(
        "makeup.ph",
        Form::Number,
        "",
        "pH of the makeup water?",
        "what a water change does",
    ),
    q(
        "makeup.alkalinity",
        Form::Number,
        "",
        "Its alkalinity, mg/L as CaCO3?",
        "the same",
    ),
    q(
        "makeup.chloride",
        Form::Number,
        "",
        "Its chloride, mg/L?",
        "chloride keeps nitrite out of fish",
    ),
    q(
        "makeup.temperature",
        Form::Number,
        "",
        "Its temperature, C?",
        "how fast it may go in",
    ),
    q(
        "equipment.solids_filter",
        Form::Flag,
        "",
        "Is there a filter that takes solids out (yes/no)?",
        "its rounds are on the checklist",
    ),
    q(
        "equipment.standby_air",
        Form::Flag,
        "",
        "Is there spare air when the usual air is off (yes/no)?",
        "what first aid can ask for",
    ),
    q(
        "equipment.pure_oxygen",
        Form::Flag,
        "",
        "Is there bottled or generated oxygen (yes/no)?",
        "the same, and its rounds",
    ),
    q(
        "equipment.backup_power",
        Form::Flag,
        "",
        "Is there power when the mains are off (yes/no)?",
        "the same, and its rounds",
    ),
    q(
        "log",
        Form::Text,
        "log.csv",
        "File of the log, beside the site file?",
        "every command reads it",
    ),
    q(
        "incidents",
        Form::Text,
        "incidents",
        "Folder of incidents, beside the site file?",
        "where incidents are kept",
    ),
];

/// Lists of tables, asked row by row until nothing is answered: the table, its first question, and its keys.
pub(super) struct Rows {
    /// `[[key]]`.
    pub key: &'static str,
    /// What is said first.
    pub lead: &'static str,
    /// What it is good for.
    pub why: &'static str,
    /// Key, question, form, usual answer.
    pub columns: &'static [(&'static str, &'static str, Form, &'static str)],
}

/// The lists, in the order they are asked.
pub(super) const ROWS: [Rows; 3] = [
    Rows {
        key: "shift",
        lead: "Shifts, one after the other; Enter at the name when there are no more.",
        why: "checklists and handovers are made for them",
        columns: &[
            ("name", "Name of the shift, such as early?", Form::Text, ""),
            ("start", "It starts at (HH:MM)?", Form::Text, "06:00"),
            ("end", "It ends at (HH:MM)?", Form::Text, "14:00"),
        ],
    },
    Rows {
        key: "place",
        lead: "Places in the order you walk them; Enter at the name when there are no more.",
        why: "the checklist goes the way you walk",
        columns: &[
            ("name", "Name of the place, such as tank 1?", Form::Text, ""),
            ("kind", "What is it?", Form::Listed("kind"), "tank"),
        ],
    },
    Rows {
        key: "phone",
        lead: "Whom to call (fish vet, electrician, extension service, emergency); Enter when there are no more.",
        why: "stands on every checklist and on the card for the wall",
        columns: &[
            ("who", "Who?", Form::Text, ""),
            ("number", "Number?", Form::Text, ""),
        ],
    },
];
