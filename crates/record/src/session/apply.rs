//! Carrying out edits, taking them back, making them again.

use std::collections::BTreeMap;
use std::sync::{Arc, OnceLock};

use analysis::decisions::{Exclusion, Mark, Phase};
use analysis::predicted::sets::{PredictedSet, Predicts};
use analysis::results::Results;
use analysis::settings::Settings;
use serde_json::Value;

use super::findings::{self, Finding, Status};
use super::history::{self, Action, Entry};
use super::settings_file::SettingsFile;
use super::{ENGINE, Edit, Judgement, Session, Signed, State, boundary, derive, problems};
use crate::facts_file::Source;
use crate::problem::Problem;
use crate::{clock, results_json};

type Done = Result<(), Problem>;

impl Session {
    /// Carries out one edit: one undo step, one entry in the history.
    ///
    /// # Errors
    /// The edit cannot be carried out, or the session is signed; nothing is changed then.
    pub fn apply(&mut self, edit: &Edit, now: &str) -> Done {
        self.apply_together(std::slice::from_ref(edit), now).map_err(|mut p| {
            p.where_ = "the edit".into();
            p
        })
    }

    /// Carries out several edits in order as one undo step, or none of them.
    ///
    /// # Errors
    /// As [`Session::apply`]; `where_` is `edits[INDEX]` of the first that cannot be carried out.
    pub fn apply_together(&mut self, edits: &[Edit], now: &str) -> Done {
        clock::parse(now)?;
        let mut next = self.clone();
        for (i, edit) in edits.iter().enumerate() {
            next.carry_out(edit, now).map_err(|mut p| {
                p.where_ = format!("edits[{i}]");
                p
            })?;
        }
        if next.signed().is_some() {
            next.undo.clear();
        } else if !edits.is_empty() {
            next.undo.push(edits.to_vec(), Arc::clone(&self.judgement));
        }
        *self = next;
        Ok(())
    }

    /// Takes the last step back; `false` where there is none.
    ///
    /// # Errors
    /// `now` is not a time.
    pub fn undo(&mut self, now: &str) -> Result<bool, Problem> {
        clock::parse(now)?;
        let step = self.undo.back(Arc::clone(&self.judgement));
        Ok(self.step_to(step, Action::Undone, now))
    }

    /// Makes the last step taken back again; `false` where there is none.
    ///
    /// # Errors
    /// `now` is not a time.
    pub fn redo(&mut self, now: &str) -> Result<bool, Problem> {
        clock::parse(now)?;
        let step = self.undo.forth(Arc::clone(&self.judgement));
        Ok(self.step_to(step, Action::Redone, now))
    }

    fn step_to(&mut self, step: Option<super::undo::Step>, action: Action, now: &str) -> bool {
        let Some(step) = step else { return false };
        let before = Arc::clone(self.results());
        self.judgement = step.judgement;
        self.derived = OnceLock::new();
        let changed = history::changes(&before, self.results());
        let last = step.edits.len().saturating_sub(1);
        for (i, edit) in step.edits.into_iter().enumerate() {
            let changed = if i == last { changed.clone() } else { Vec::new() };
            self.history.push(Entry { at: now.to_owned(), action, edit: Some(edit), changed });
        }
        true
    }

    fn carry_out(&mut self, edit: &Edit, now: &str) -> Done {
        if self.signed().is_some() {
            return Err(problems::signed());
        }
        let before = Arc::clone(self.results());
        let mut judgement = (*self.judgement).clone();
        self.change(&mut judgement, edit, &before)?;
        let mut changed = Vec::new();
        if changes_numbers(edit) {
            let after = Arc::new(derive(&self.recording, &judgement));
            changed = history::changes(&before, &after);
            self.derived = OnceLock::from(after);
        }
        self.judgement = Arc::new(judgement);
        if let Edit::Sign { .. } = edit {
            self.sign(edit, &before, now)?;
        }
        let (at, edit) = (now.to_owned(), Some(edit.clone()));
        self.history.push(Entry { at, action: Action::Edited, edit, changed });
        Ok(())
    }

    fn change(&self, j: &mut Judgement, edit: &Edit, results: &Results) -> Done {
        match edit {
            Edit::SetBoundary { phase, t_s } => {
                j.decisions.phases.set(*phase, Some(self.place(results, *phase, *t_s)?));
            }
            Edit::ClearBoundary { phase } => j.decisions.phases.set(*phase, None),
            Edit::ExcludeBreaths { from_s, to_s, reason } => {
                self.check_stretch(*from_s, *to_s, reason)?;
                j.decisions.excluded.push(Exclusion { from_s: *from_s, to_s: *to_s });
                j.exclusion_reasons.push(reason.trim().to_owned());
            }
            Edit::IncludeBreaths { from_s, to_s } => include(j, *from_s, *to_s)?,
            Edit::SetMark { mark, t_s } => {
                self.check_time(*t_s)?;
                set_mark(j, *mark, Some(*t_s));
            }
            Edit::ClearMark { mark } => set_mark(j, *mark, None),
            Edit::SetTwoFactor { from_s, to_s } => {
                j.decisions.two_factor_s = self.two_factor(*from_s, *to_s)?;
            }
            Edit::SetFact { path, value } => set_fact(j, path, value)?,
            Edit::AddEvent { event } => {
                let path = format!("events[{}]", j.facts.events.len());
                j.facts.set(&path, event.clone())?;
                j.event_sources.push(Source::Reader);
            }
            Edit::RemoveEvent { index } => remove_event(j, *index)?,
            Edit::FindingText { .. } | Edit::FindingStatus { .. } | Edit::FindingAdd { .. } => {
                change_finding(&mut j.findings, edit, results)?;
            }
            Edit::SetAveraging { .. }
            | Edit::SetPredicted { .. }
            | Edit::AddPredictedSet { .. }
            | Edit::SetOverlayShown { .. }
            | Edit::SetSetting { .. } => change_setting(j, edit)?,
            Edit::Sign { name, meaning, .. } => check_signature(name, meaning)?,
        }
        Ok(())
    }

    fn place(&self, results: &Results, phase: Phase, t_s: f64) -> Result<f64, Problem> {
        boundary::placed(&self.recording, &results.phases, phase, t_s).ok_or_else(|| {
            problems::edit(
                "boundary-crosses",
                format!("{} cannot start at {t_s} s.", phase.code()),
                "Boundaries stay in order inside the recording, and a phase lasts at least 10 s.",
            )
        })
    }

    fn check_time(&self, t_s: f64) -> Done {
        let (first, last) = self.recording.span_s().unwrap_or((0.0, 0.0));
        if t_s >= first && t_s <= last {
            return Ok(());
        }
        let what = format!("{t_s} s is not within the recording, {first} to {last} s.");
        Err(problems::edit("time-outside", what, "Give a time of the recording."))
    }

    fn check_stretch(&self, from_s: f64, to_s: f64, reason: &str) -> Done {
        let breaths = &self.recording.breaths;
        let any = (0..breaths.len()).any(|i| (from_s..=to_s).contains(&breaths.mid_s(i)));
        if !any {
            let what = format!("There is no breath between {from_s} and {to_s} s.");
            return Err(problems::edit("no-breath", what, "Choose a stretch with breaths."));
        }
        if reason.trim().is_empty() {
            let what = "Breaths are left out with a reason only.";
            return Err(problems::edit("reason-missing", what, "State the reason."));
        }
        Ok(())
    }

    fn two_factor(
        &self,
        from: Option<f64>,
        to: Option<f64>,
    ) -> Result<Option<(f64, f64)>, Problem> {
        match (from, to) {
            (None, None) => Ok(None),
            (Some(from), Some(to)) if from < to => {
                self.check_time(from)?;
                self.check_time(to)?;
                Ok(Some((from, to)))
            }
            _ => Err(problems::edit(
                "two-factor-times",
                "The two instants are not both there, the earlier one first.",
                "Give both, or neither for the ends of the late window.",
            )),
        }
    }

    /// Freezes the results under the signature.
    fn sign(&mut self, edit: &Edit, results: &Results, now: &str) -> Done {
        let Edit::Sign { name, role, registration, meaning } = edit else { return Ok(()) };
        let questions = &self.recipe.questions;
        self.state = State::Signed(Box::new(Signed {
            name: name.trim().to_owned(),
            role: role.trim().to_owned(),
            registration: registration.trim().to_owned(),
            meaning: meaning.trim().to_owned(),
            at: now.to_owned(),
            engine: ENGINE.to_owned(),
            results: results_json::to_value(results, ENGINE, questions),
        }));
        Ok(())
    }
}

/// Whether numbers may differ after `edit`.
fn changes_numbers(edit: &Edit) -> bool {
    !matches!(
        edit,
        Edit::FindingText { .. }
            | Edit::FindingStatus { .. }
            | Edit::FindingAdd { .. }
            | Edit::Sign { .. }
    )
}

fn include(j: &mut Judgement, from_s: f64, to_s: f64) -> Done {
    let same = |e: &Exclusion| (e.from_s, e.to_s) == (from_s, to_s);
    let Some(place) = j.decisions.excluded.iter().position(same) else {
        let what = format!("Nothing was left out from {from_s} to {to_s} s.");
        return Err(problems::edit(
            "not-excluded",
            what,
            "Give the ends with which it was left out.",
        ));
    };
    j.decisions.excluded.remove(place);
    j.exclusion_reasons.remove(place);
    Ok(())
}

fn set_mark(j: &mut Judgement, mark: Mark, t_s: Option<f64>) {
    match mark {
        Mark::Vt1 => j.decisions.vt1_s = t_s,
        Mark::Vt2 => j.decisions.vt2_s = t_s,
    }
}

fn set_fact(j: &mut Judgement, path: &str, value: &Value) -> Done {
    if path.split(['.', '[']).next() == Some("phases") {
        let todo = "Use the edit “set-boundary”.";
        return Err(problems::edit("fact-is-decision", "Boundaries are decisions.", todo));
    }
    let events = j.facts.events.len();
    j.facts.set(path, value.clone())?;
    if path.split(['.', '[']).next() == Some("events") {
        let now = j.facts.events.len();
        if now != events {
            let todo = "Use the edits “add-event” and “remove-event”.";
            return Err(problems::edit("fact-is-event", "The list of events would change.", todo));
        }
    }
    j.by_reader.insert(path.to_owned());
    Ok(())
}

fn remove_event(j: &mut Judgement, index: usize) -> Done {
    if index >= j.facts.events.len() {
        let what = format!("There is no event {index}.");
        return Err(problems::edit("no-event", what, "Give the place of an event in the list."));
    }
    j.facts.events.remove(index);
    if index < j.event_sources.len() {
        j.event_sources.remove(index);
    }
    Ok(())
}

fn change_setting(j: &mut Judgement, edit: &Edit) -> Done {
    let file = match edit {
        Edit::SetSetting { path, value } => SettingsFile::of(&j.settings).with(path, value)?,
        Edit::SetAveraging { method, n } => {
            let mut settings = j.settings.clone();
            settings.averaging = method.over(*n);
            SettingsFile::of(&settings).checked()?
        }
        Edit::SetPredicted { vo2, hr, others } => {
            SettingsFile::of(&chosen_sets(&j.settings, vo2.as_ref(), hr.as_ref(), others)?)
        }
        Edit::AddPredictedSet { text } => {
            SettingsFile::of(&j.settings).with_set(text, &j.settings)?
        }
        Edit::SetOverlayShown { shown } => {
            j.settings.overlay_shown = *shown;
            return Ok(());
        }
        _ => return Ok(()),
    };
    j.settings = file.to_engine(&j.settings);
    Ok(())
}

fn chosen_sets(
    now: &Settings,
    vo2: Option<&String>,
    hr: Option<&String>,
    others: &BTreeMap<String, String>,
) -> Result<Settings, Problem> {
    let mut settings = now.clone();
    let pick = |quantity: Predicts, id: &String| {
        let gives = |s: &PredictedSet| s.id == *id && s.equation(quantity).is_some();
        if settings.sets.is_empty() || settings.sets.iter().any(gives) {
            return Ok(id.clone());
        }
        let what = format!("No predicted set “{id}” gives {}.", quantity.code());
        Err(problems::edit("set-unknown", what, "Choose one of the sets."))
    };
    let mut choice = settings.predicted.clone();
    if let Some(id) = vo2 {
        choice.vo2 = pick(Predicts::Vo2Peak, id)?;
    }
    if let Some(id) = hr {
        choice.hr = pick(Predicts::HrPeak, id)?;
    }
    for (code, id) in others {
        let quantity = Predicts::from_code(code).ok_or_else(|| {
            let what = format!("Nothing predicts “{code}”.");
            problems::edit("set-unknown", what, "Use the code of a set file, such as work-rate.")
        })?;
        let id = pick(quantity, id)?;
        match quantity {
            Predicts::Vo2Peak => choice.vo2 = id,
            Predicts::HrPeak => choice.hr = id,
            other => {
                choice.others.insert(other, id);
            }
        }
    }
    settings.predicted = choice;
    Ok(settings)
}

fn change_finding(list: &mut Vec<Finding>, edit: &Edit, results: &Results) -> Done {
    match edit {
        Edit::FindingText { id, text } => {
            let text = said(text)?;
            let finding = taken(list, id, results)?;
            finding.text = text;
            finding.edited = true;
        }
        Edit::FindingStatus { id, status } => {
            let finding = taken(list, id, results)?;
            finding.status = *status;
            if *status == Status::Draft && !finding.edited {
                let id = id.clone();
                list.retain(|f| f.id != id || f.drafted.is_empty());
            }
        }
        Edit::FindingAdd { section, text } => {
            if findings::section(section).is_none() {
                let what = format!("There is no section “{section}”.");
                let todo = "Use safety, effort, capacity, circulation, breathing or separate.";
                return Err(problems::edit("section-unknown", what, todo));
            }
            let number = 1 + list
                .iter()
                .filter_map(|f| f.id.strip_prefix("own-")?.parse::<usize>().ok())
                .max()
                .unwrap_or(0);
            list.push(Finding {
                id: format!("own-{number}"),
                section: section.clone(),
                status: Status::Accepted,
                text: said(text)?,
                edited: true,
                drafted: String::new(),
                under: Vec::new(),
            });
        }
        _ => {}
    }
    Ok(())
}

fn said(text: &str) -> Result<String, Problem> {
    let text = text.trim();
    if text.is_empty() {
        let todo = "Write it, or decline the statement.";
        return Err(problems::edit("text-missing", "The statement has no text.", todo));
    }
    Ok(text.to_owned())
}

/// The finding `id`, taken up as the draft reads now. A text that is the reader's stays; the
/// values under it are those of now, because the reader looks at them now.
fn taken<'a>(
    list: &'a mut Vec<Finding>,
    id: &str,
    results: &Results,
) -> Result<&'a mut Finding, Problem> {
    let place = list.iter().position(|f| f.id == id);
    let drafted = results.statements.iter().find(|s| s.id == id);
    let place = match (place, drafted) {
        (Some(place), None) => place,
        (Some(place), Some(statement)) => {
            let fresh = findings::taken_up(statement, results);
            let old = &mut list[place];
            if !old.edited {
                old.text = fresh.text;
            }
            old.drafted = fresh.drafted;
            old.under = fresh.under;
            place
        }
        (None, Some(statement)) => {
            list.push(findings::taken_up(statement, results));
            list.len() - 1
        }
        (None, None) => {
            let what = format!("There is no statement “{id}”.");
            return Err(problems::edit("finding-unknown", what, "Choose one of the sheet."));
        }
    };
    Ok(&mut list[place])
}

fn check_signature(name: &str, meaning: &str) -> Done {
    let lacking = if name.trim().is_empty() {
        "name"
    } else if meaning.trim().is_empty() {
        "meaning"
    } else {
        return Ok(());
    };
    let what = format!("The signature has no {lacking}.");
    Err(problems::edit(
        "signature-incomplete",
        what,
        "Type it; a signature states who and what for.",
    ))
}
