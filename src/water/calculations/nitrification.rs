//! Stoichiometry of nitrification.

use super::{Calculation, Failure, Inputs, Key, Subject};
use crate::water::nitrification::{self as n, Basis};

const SOURCE: &[&str] = &[
    "energy: arithmetic (EPA 1975)",
    "net: Gujer & Jenkins 1974",
    "with-cells: Ebeling, Timmons & Bisogni 2006, Aquaculture 257:346 (from memory)",
];

static BASES: &[(&str, Basis)] = &[
    ("energy", Basis::Energy),
    ("energy-first-step", Basis::EnergyFirstStep),
    ("energy-second-step", Basis::EnergySecondStep),
    ("net-first-step", Basis::NetFirstStep),
    ("net-second-step", Basis::NetSecondStep),
    ("net-both-steps", Basis::NetBothSteps),
    ("with-cells", Basis::WithCells),
];

const BASIS: Key = Key::word(
    "basis",
    &[
        "energy",
        "energy-first-step",
        "energy-second-step",
        "net-first-step",
        "net-second-step",
        "net-both-steps",
        "with-cells",
    ],
    "what is counted",
);

fn basis(inputs: &Inputs) -> Result<Basis, Failure> {
    let word = inputs.word("basis")?;
    BASES
        .iter()
        .find(|(name, _)| *name == word)
        .map(|(_, basis)| *basis)
        .ok_or(Failure::Undeclared { key: "basis" })
}

pub static SUBJECT: Subject = Subject {
    title: "Nitrification and denitrification, per gram of nitrogen",
    listed: true,
    calculations: &[
        Calculation {
            name: "nitrification-oxygen",
            help: "oxygen taken; `energy` is the safe side for aeration",
            unit: "g/g N",
            keys: &[BASIS.or_word("energy")],
            source: SOURCE,
            compute: |i| Ok(n::oxygen(basis(i)?)),
        },
        Calculation {
            name: "nitrification-alkalinity",
            help: "alkalinity taken",
            unit: "g CaCO3/g N",
            keys: &[BASIS.or_word("with-cells")],
            source: SOURCE,
            compute: |i| Ok(n::alkalinity(basis(i)?)),
        },
        Calculation {
            name: "nitrification-cells",
            help: "cells grown",
            unit: "g VSS/g N",
            keys: &[BASIS.or_word("with-cells")],
            source: SOURCE,
            compute: |i| Ok(n::cells(basis(i)?)),
        },
        Calculation {
            name: "nitrification-carbon-dioxide",
            help: "carbon dioxide freed from bicarbonate",
            unit: "g/g N",
            keys: &[],
            source: &["Ebeling, Timmons & Bisogni 2006 (from memory)"],
            compute: |_| Ok(n::CARBON_DIOXIDE),
        },
        Calculation {
            name: "denitrification-alkalinity-gain",
            help: "alkalinity that denitrification gives back",
            unit: "g CaCO3/g N",
            keys: &[],
            source: &["arithmetic: one equivalent for each mole of nitrate"],
            compute: |_| Ok(n::DENITRIFICATION_ALKALINITY),
        },
    ],
};
