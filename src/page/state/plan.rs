//! Laying out a truss of a usual configuration: what is typed, and the truss that comes of it.

use super::files;
use super::model::{Source, State};
use super::{Effect, Shown};
use crate::measure::{Sheet, parse_length};
use crate::truss::{Configuration, Measures, Truss, configured};
use num_traits::Zero;

/// What is typed for a layout; kept as it is typed.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Plan {
    /// The configuration.
    pub configuration: Configuration,
    /// The measures, by [`PlanField`].
    pub texts: [String; 5],
    /// Whether all figures are added.
    pub figured: bool,
}

/// A measure of a layout.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum PlanField {
    /// Between the supports.
    Span,
    /// Panels of the bottom chord.
    Panels,
    /// The height.
    Height,
    /// The heel height.
    Heel,
    /// What the configuration has besides.
    Other,
}

impl PlanField {
    /// All of them, in the order of [`Plan::texts`].
    pub const ALL: [PlanField; 5] =
        [PlanField::Span, PlanField::Panels, PlanField::Height, PlanField::Heel, PlanField::Other];

    /// What it is called for a configuration; `None` where it has no such measure.
    pub fn name(self, configuration: Configuration) -> Option<&'static str> {
        match self {
            PlanField::Span => Some("span"),
            PlanField::Panels => configuration.has_panels().then_some("panels"),
            PlanField::Height => Some("height"),
            PlanField::Heel => configuration.has_heel().then_some("heel height"),
            PlanField::Other => configuration.other(),
        }
    }
}

impl Plan {
    /// A plan with measures that make a truss at once.
    pub(super) fn usual(truss: &Truss) -> Plan {
        let texts = match truss.unit.is_imperial() {
            true => ["40'", "8", "8'", "0", "2'"],
            false => ["12 m", "8", "2.4 m", "0", "600 mm"],
        };
        Plan { configuration: Configuration::default(), texts: texts.map(String::from), figured: true }
    }

    pub(super) fn text_mut(&mut self, field: PlanField) -> &mut String {
        &mut self.texts[field as usize]
    }

    /// The truss that is laid out.
    ///
    /// # Errors
    ///
    /// Which measure is wrong, and what was expected.
    pub fn truss(&self, sheet: &Truss) -> Result<Truss, String> {
        let length = |field: PlanField| {
            let Some(name) = field.name(self.configuration) else { return Ok(Zero::zero()) };
            parse_length(&self.texts[field as usize], sheet.unit).map_err(|error| format!("{name}: {error}"))
        };
        let panels = match self.configuration.has_panels() {
            true => self.texts[PlanField::Panels as usize].trim().parse().unwrap_or(0),
            false => 0,
        };
        let measures = Measures {
            span: length(PlanField::Span)?,
            panels,
            height: length(PlanField::Height)?,
            heel: length(PlanField::Heel)?,
            other: length(PlanField::Other)?,
            figured: self.figured,
        };
        configured(self.configuration, &measures, sheet.unit, &sheet.step)
    }

    /// A measure as it is understood.
    pub fn understood(&self, field: PlanField, sheet: &Truss) -> String {
        if field == PlanField::Panels {
            return String::new();
        }
        let value = parse_length(&self.texts[field as usize], sheet.unit);
        value.map_or_else(|_| String::new(), |value| Sheet::of(sheet.unit, &sheet.step.value).exact_words(&value))
    }
}

/// Opens the plan, on a new sheet where there is none.
pub(super) fn open(state: &mut State, effects: &mut Vec<Effect>) {
    if state.source.is_none() {
        files::open(state, Truss::default(), Source::Own, effects);
    }
    state.plan = Some(Plan::usual(&state.truss));
    state.help = false;
}

/// Puts the planned truss on the sheet, as a change that can be undone. A plan that makes no truss stays open.
pub(super) fn take(state: &mut State, effects: &mut Vec<Effect>) {
    let Some(Ok(mut truss)) = state.plan.as_ref().map(|plan| plan.truss(&state.truss)) else { return };
    if !state.truss.title.is_empty() && state.truss.joints.is_empty() {
        truss.title.clone_from(&state.truss.title);
    }
    files::open(state, truss, Source::Own, effects);
    effects.push(Effect::Keep(state.truss.clone()));
    state.plan = None;
    state.pen = super::Pen::Up;
    state.shown = Shown::Layout;
    effects.push(Effect::FocusBoard);
}
