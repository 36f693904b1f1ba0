//! The conversation: the vital signs, what is told, what is asked; and what may be typed at any of them.

use std::io;

use super::front::Front;
use super::keep::Keeper;
use super::words;
use crate::cli::context::Context;
use crate::vocabulary::ReadingId;
use crate::walk::typed::{self, Typed};
use crate::walk::{Answer, Ask, Given, Next, Screen, Stage, Stop, Turn, Walk};
use crate::water::oxygen;

/// From this share of saturation on a person is asked whether oxygen was read right.
const ODD: f64 = 1.5;

/// How a conversation ended.
pub(super) enum Ended {
    /// Asking stopped by itself.
    Asked(Stop),
    /// The person said stop.
    Told,
    /// Nobody is there any more: the walk is kept.
    Gone,
}

/// A person's answer, or what else was typed.
enum Heard {
    Text(String),
    Nothing,
    CannotMeasure,
    Back,
    Why,
    Stop,
    Gone,
}

/// What came of one question.
enum Came {
    Answer(Answer),
    Back,
    Stop,
    Gone,
}

/// One conversation.
pub(super) struct Dialog<'a, 'k> {
    pub context: &'k Context,
    pub walk: &'a mut Walk<'k>,
    pub front: &'a mut dyn Front,
    pub keeper: &'a Keeper,
    /// What is taken for now, unix seconds.
    pub now: i64,
    /// First aid has been said.
    pub aided: bool,
    /// Answers of the turn that is not finished.
    pub pending: Vec<Given>,
}

impl Dialog<'_, '_> {
    /// Talks until asking stops.
    pub fn talk(&mut self) -> io::Result<Ended> {
        self.front.say(words::KEYS)?;
        loop {
            self.aid()?;
            let turn = match self.walk.next() {
                Next::Stop(stop) => return Ok(Ended::Asked(stop)),
                Next::Vital(screen) => self.vital(&screen)?,
                Next::Tell => self.tell()?,
                Next::Ask(screen) => self.screen(&screen)?,
            };
            match turn {
                Go::On(turn) => self.walk.take(turn),
                Go::Back => {
                    if self.walk.back().is_none() {
                        self.front.say("This is the beginning.")?;
                    }
                    self.aided = self.aided && self.walk.alarm();
                }
                Go::Stop(turn) => {
                    self.walk.take(turn);
                    self.save(&[])?;
                    return Ok(Ended::Told);
                }
                Go::Gone(turn) => {
                    self.save(&[Turn {
                        stage: Stage::Asked,
                        ..turn
                    }])?;
                    return Ok(Ended::Gone);
                }
            }
            self.save(&[])?;
        }
    }

    /// First aid, once for each alarm.
    fn aid(&mut self) -> io::Result<()> {
        if !self.aided
            && let Some(text) = words::first_aid(self.walk)
        {
            self.aided = true;
            self.front.say(&format!("\n{text}\n"))?;
        }
        Ok(())
    }

    fn save(&mut self, unfinished: &[Turn]) -> io::Result<()> {
        self.pending = unfinished
            .iter()
            .flat_map(|t| t.given.iter().copied())
            .collect();
        let mut turns = self.walk.turns().to_vec();
        turns.extend(unfinished.iter().filter(|t| !t.given.is_empty()).cloned());
        self.keeper.save(self.context, &turns)
    }

    fn hear(&mut self) -> io::Result<Heard> {
        let Some(line) = self.front.hear()? else {
            return Ok(Heard::Gone);
        };
        let line = line.trim();
        Ok(match line.to_lowercase().as_str() {
            "" | "d" => Heard::Nothing,
            "c" => Heard::CannotMeasure,
            "b" => Heard::Back,
            "w" | "?" => Heard::Why,
            "s" => Heard::Stop,
            _ => Heard::Text(line.to_owned()),
        })
    }

    fn given(&self, ask: Ask, answer: Answer) -> Given {
        Given {
            ask,
            answer,
            time: self.now,
        }
    }

    /// The vital signs: those are picked that are so.
    fn vital(&mut self, screen: &Screen) -> io::Result<Go> {
        self.front.say("\nFIRST OF ALL: is any of these so now?")?;
        let turn = |given| Turn {
            stage: Stage::Vital,
            given,
        };
        match self.pick(
            &screen.asks,
            "Type the numbers that are so, such as 3 or 3 6. Enter  none that you know of.",
        )? {
            Picked::These(asks) => Ok(Go::On(turn(
                asks.into_iter()
                    .map(|a| self.given(a, Answer::Seen(true)))
                    .collect(),
            ))),
            Picked::Back => Ok(Go::Back),
            Picked::Stop => Ok(Go::Stop(turn(Vec::new()))),
            Picked::Gone => Ok(Go::Gone(turn(Vec::new()))),
        }
    }

    fn pick(&mut self, asks: &[Ask], how: &str) -> io::Result<Picked> {
        let words = &self.context.knowledge.vocabulary;
        let lines: Vec<String> = asks
            .iter()
            .enumerate()
            .map(|(n, a)| format!("{}  {}", n + 1, a.name(words)))
            .collect();
        self.front.say(&format!("{}\n{how}", lines.join("\n")))?;
        loop {
            match self.hear()? {
                Heard::Nothing | Heard::CannotMeasure => return Ok(Picked::These(Vec::new())),
                Heard::Back => return Ok(Picked::Back),
                Heard::Stop => return Ok(Picked::Stop),
                Heard::Gone => return Ok(Picked::Gone),
                Heard::Why => self.front.say("What you pick says where to look first; what you don't pick counts as not looked at.")?,
                Heard::Text(text) => match typed::picks(&text, asks.len()) {
                    Ok(picked) => return Ok(Picked::These(picked.into_iter().filter_map(|n| asks.get(n).copied()).collect())),
                    Err(reason) => self.front.say(&reason)?,
                },
            }
        }
    }

    /// What was noticed, measured or done, told without being asked.
    fn tell(&mut self) -> io::Result<Go> {
        let groups = &self.context.knowledge.walk.groups;
        let mut turn = Turn {
            stage: Stage::Told,
            given: Vec::new(),
        };
        loop {
            let mut menu = "\nWHAT ELSE HAVE YOU NOTICED, MEASURED OR DONE?\n".to_owned();
            for (n, group) in groups.iter().enumerate() {
                menu.push_str(&format!("{}  {}\n", n + 1, group.name));
            }
            menu.push_str(
                "Type one number; or a measurement, such as `ph 6.9`. Enter  nothing more, ask me.",
            );
            self.front.say(&menu)?;
            match self.hear()? {
                Heard::Nothing | Heard::CannotMeasure => return Ok(Go::On(turn)),
                Heard::Back if turn.given.is_empty() => return Ok(Go::Back),
                Heard::Back => {
                    turn.given.pop();
                    self.front.say("The last thing you told is taken back.")?;
                }
                Heard::Stop => return Ok(Go::Stop(turn)),
                Heard::Gone => return Ok(Go::Gone(turn)),
                Heard::Why => self
                    .front
                    .say("What you tell by yourself saves questions.")?,
                Heard::Text(text) if text.bytes().all(|b| b.is_ascii_digit()) => {
                    match typed::picks(&text, groups.len()) {
                        Ok(picked) => {
                            let group = picked.first().and_then(|n| groups.get(*n));
                            if let Some(group) = group
                                && self.tell_of(&self.walk.group(group), &mut turn)?
                            {
                                return Ok(Go::Gone(turn));
                            }
                        }
                        Err(reason) => self.front.say(&reason)?,
                    }
                }
                Heard::Text(text) => match self.measurement(&text)? {
                    Some(given) => turn.given.push(given),
                    None => continue,
                },
            }
            // Until it is finished it is kept as asked for, so that a walk that goes on offers to tell more.
            self.save(&[Turn {
                stage: Stage::Asked,
                given: turn.given.clone(),
            }])?;
        }
    }

    /// Picks from one group; `true` when nobody is there any more.
    fn tell_of(&mut self, asks: &[Ask], turn: &mut Turn) -> io::Result<bool> {
        match self.pick(
            asks,
            "Type the numbers that are so, such as 2 or 2 5. Enter  none.",
        )? {
            Picked::Gone => Ok(true),
            Picked::Back | Picked::Stop => Ok(false),
            Picked::These(picked) => {
                for ask in picked {
                    let answer = match ask {
                        Ask::Event(_) => {
                            self.front.say(&format!("{}: when?", self.name(ask)))?;
                            match self.one(ask)? {
                                Came::Answer(answer) => answer,
                                Came::Gone => return Ok(true),
                                Came::Back | Came::Stop => continue,
                            }
                        }
                        _ => Answer::Seen(true),
                    };
                    turn.given.retain(|g| g.ask != ask);
                    turn.given.push(self.given(ask, answer));
                }
                Ok(false)
            }
        }
    }

    fn name(&self, ask: Ask) -> String {
        ask.name(&self.context.knowledge.vocabulary).to_owned()
    }

    /// A measurement such as `ph 6.9` or `nitrite 2 mg/L as NO2`.
    fn measurement(&mut self, text: &str) -> io::Result<Option<Given>> {
        let words = &self.context.knowledge.vocabulary;
        let at = text
            .find(|c: char| c.is_ascii_digit() || matches!(c, '-' | '.') && text.contains(' '))
            .unwrap_or(text.len());
        let (name, number) = text.split_at(at);
        let found = typed::reading(
            words.readings.iter().filter(|r| !r.derived),
            name.trim_matches([' ', '=', ':']),
        );
        match found {
            Ok(reading) => {
                let Some(id) = words.reading(&reading.id) else {
                    return Ok(None);
                };
                Ok(self
                    .number(id, number)?
                    .map(|value| self.given(Ask::Reading(id), Answer::Number(value))))
            }
            Err(reason) => {
                self.front.say(&reason)?;
                Ok(None)
            }
        }
    }

    /// The questions of a screen, a line each.
    fn screen(&mut self, screen: &Screen) -> io::Result<Go> {
        let mut turn = Turn {
            stage: Stage::Asked,
            given: Vec::new(),
        };
        let words = &self.context.knowledge.vocabulary;
        self.front
            .say(&format!("\n{}", screen.title.to_uppercase()))?;
        let mut at = 0;
        while let Some(ask) = screen.asks.get(at).copied() {
            self.front.say(&ask.question(words).text)?;
            match self.one(ask)? {
                Came::Answer(answer) => {
                    turn.given.push(self.given(ask, answer));
                    self.save(std::slice::from_ref(&turn))?;
                    at += 1;
                    if answer == Answer::CannotMeasure {
                        break;
                    }
                }
                Came::Back if at > 0 => {
                    turn.given.pop();
                    at -= 1;
                }
                Came::Back => return Ok(Go::Back),
                Came::Stop => return Ok(Go::Stop(turn)),
                Came::Gone => return Ok(Go::Gone(turn)),
            }
        }
        Ok(Go::On(turn))
    }

    /// One answer to one question.
    fn one(&mut self, ask: Ask) -> io::Result<Came> {
        let words = &self.context.knowledge.vocabulary;
        self.front.say(match ask {
            Ask::Sign(_) => "y  yes, n  no, Enter  don't know",
            Ask::Event(_) => "Type how long ago, such as `5 h` or `2 d`; n  no, Enter  don't know",
            Ask::Reading(_) => "Type the number, with its unit if you like; Enter  don't know",
        })?;
        loop {
            let text = match self.hear()? {
                Heard::Nothing => return Ok(Came::Answer(Answer::Unknown)),
                Heard::CannotMeasure => return Ok(Came::Answer(Answer::CannotMeasure)),
                Heard::Back => return Ok(Came::Back),
                Heard::Stop => return Ok(Came::Stop),
                Heard::Gone => return Ok(Came::Gone),
                Heard::Why => {
                    let why = words::why(self.walk, ask);
                    self.front.say(&why)?;
                    continue;
                }
                Heard::Text(text) => text,
            };
            match ask {
                Ask::Sign(_) => match text.to_lowercase().as_str() {
                    "y" | "yes" | "1" => return Ok(Came::Answer(Answer::Seen(true))),
                    "n" | "no" | "0" => return Ok(Came::Answer(Answer::Seen(false))),
                    _ => self.front.say("Type y, n, or Enter if you don't know.")?,
                },
                Ask::Event(_) => {
                    match typed::happened(&text, &self.context.site.timezone, self.now) {
                        Ok(happened) => return Ok(Came::Answer(Answer::Happened(happened))),
                        Err(reason) => self.front.say(&reason)?,
                    }
                }
                Ask::Reading(id) => match self.number(id, &text)? {
                    Some(value) => return Ok(Came::Answer(Answer::Number(value))),
                    None => self.front.say(&format!("Once more: {}?", words[id].name))?,
                },
            }
        }
    }

    /// A number as it was typed, in the unit that its reading is kept in; `None` when it can't be used, which was said.
    fn number(&mut self, id: ReadingId, text: &str) -> io::Result<Option<f64>> {
        let reading = &self.context.knowledge.vocabulary[id];
        let value = match typed::number(reading, text) {
            Ok(Typed::Kept(value)) => Ok(value),
            Ok(Typed::Saturation(percent)) => self.of_saturation(percent),
            Ok(Typed::Which(value, units)) => match self.which(value, &units)? {
                Some(unit) => typed::in_unit(reading, value, unit)
                    .ok_or_else(|| "That unit can't be used.".to_owned()),
                None => return Ok(None),
            },
            Err(reason) => Err(reason),
        };
        match value.and_then(|v| typed::plausible(reading, v)) {
            Ok(value) => self.sure(id, value),
            Err(reason) => {
                self.front.say(&reason)?;
                Ok(None)
            }
        }
    }

    /// Holds a number against the other answers: far more oxygen than this water can hold is asked for once more.
    fn sure(&mut self, id: ReadingId, value: f64) -> io::Result<Option<f64>> {
        let oxygen = self
            .context
            .knowledge
            .vocabulary
            .reading("dissolved-oxygen")
            == Some(id);
        let Some(full) = oxygen.then(|| self.of_saturation(100.0).ok()).flatten() else {
            return Ok(Some(value));
        };
        if value <= ODD * full {
            return Ok(Some(value));
        }
        self.front.say(&format!(
            "That is {:.0} % of what this water holds at its temperature. y  it is so, Enter  I type it again",
            100.0 * value / full
        ))?;
        let sure =
            matches!(self.hear()?, Heard::Text(text) if text.to_lowercase().starts_with('y'));
        Ok(sure.then_some(value))
    }

    /// As the element or as the ion: kits differ, and it is a factor of up to 4.4.
    fn which(&mut self, value: f64, units: &[&'static str]) -> io::Result<Option<&'static str>> {
        let lines: Vec<String> = units
            .iter()
            .enumerate()
            .map(|(n, u)| format!("{}  {value} {u}", n + 1))
            .collect();
        self.front.say(&format!(
            "How does the test give it? Its leaflet says so.\n{}\nEnter  the first",
            lines.join("\n")
        ))?;
        loop {
            match self.hear()? {
                Heard::Nothing => return Ok(units.first().copied()),
                Heard::Text(text) => match typed::picks(&text, units.len()) {
                    Ok(picked) => {
                        return Ok(picked
                            .first()
                            .and_then(|n| units.get(*n))
                            .or(units.first())
                            .copied());
                    }
                    Err(reason) => self.front.say(&reason)?,
                },
                _ => return Ok(None),
            }
        }
    }

    fn of_saturation(&self, percent: f64) -> Result<f64, String> {
        let words = &self.context.knowledge.vocabulary;
        let latest = |id: &str| {
            let id = words.reading(id)?;
            let told = self
                .pending
                .iter()
                .rev()
                .find_map(|g| match (g.ask, g.answer) {
                    (Ask::Reading(r), Answer::Number(value)) if r == id => Some(value),
                    _ => None,
                });
            told.or_else(|| Some(self.walk.engine().memory().reading(id)?.newest()?.last()?.1))
        };
        let temperature = latest("temperature").ok_or("That also needs the water's temperature. Give it in mg/L, or tell the temperature first.")?;
        let kpa = match self.context.site.elevation_m {
            Some(m) => oxygen::pressure_at(m).map_err(|e| format!("{e}."))?,
            None => oxygen::SEA_LEVEL_KPA,
        };
        let full = oxygen::solubility(temperature, latest("salinity").unwrap_or(0.0), kpa)
            .map_err(|e| format!("{e}."))?;
        Ok(full * percent / 100.0)
    }
}

/// Where a screen leads.
pub(super) enum Go {
    On(Turn),
    Back,
    Stop(Turn),
    Gone(Turn),
}

enum Picked {
    These(Vec<Ask>),
    Back,
    Stop,
    Gone,
}
