//! The table that is printed: what was measured, beside its goal.

use std::fmt::Write as _;

/// One row.
#[derive(Debug)]
pub(crate) struct Row {
    what: String,
    measured: String,
    goal: String,
    holds: Option<bool>,
}

impl Row {
    /// A row without a goal.
    pub(crate) fn plain(what: impl Into<String>, measured: impl Into<String>) -> Row {
        Row { what: what.into(), measured: measured.into(), goal: String::new(), holds: None }
    }

    /// A value that should be at most its goal.
    pub(crate) fn at_most(what: impl Into<String>, value: f64, goal: f64, unit: &str) -> Row {
        let words = [value, goal].map(|number| format!("{}{unit}", short(number)));
        Row { goal: format!("<= {}", words[1]), holds: Some(value <= goal), ..Row::plain(what, &words[0]) }
    }

    /// A value that should be at least its goal.
    pub(crate) fn at_least(what: impl Into<String>, value: f64, goal: f64, unit: &str) -> Row {
        let words = [value, goal].map(|number| format!("{}{unit}", short(number)));
        Row { goal: format!(">= {}", words[1]), holds: Some(value >= goal), ..Row::plain(what, &words[0]) }
    }

    /// The same with more to tell after the value.
    pub(crate) fn with(mut self, more: impl AsRef<str>) -> Row {
        _ = write!(self.measured, " ({})", more.as_ref());
        self
    }
}

fn short(number: f64) -> String {
    match number {
        _ if number >= 100.0 => format!("{number:.0}"),
        _ if number >= 10.0 => format!("{number:.1}"),
        _ => format!("{number:.2}"),
    }
}

/// The rows under a heading, in columns.
pub(crate) fn print(heading: &str, rows: &[Row]) {
    let width = |part: fn(&Row) -> &String| rows.iter().map(|row| part(row).chars().count()).max().unwrap_or(0);
    let (what, measured) = (width(|row| &row.what).max(40), width(|row| &row.measured).max(24));
    println!("\n== {heading} ==");
    for row in rows {
        let holds = match row.holds {
            Some(true) => "holds",
            Some(false) => "DOES NOT HOLD",
            None => "",
        };
        let line = format!("{:what$}  {:measured$}  {:10}  {holds}", row.what, row.measured, row.goal);
        println!("{}", line.trim_end());
    }
}
