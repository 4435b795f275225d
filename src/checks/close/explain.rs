//! Exclusions and blame in a drafter's words.

use super::exclusion::judge::{Case, greatest_step, lengths};
use super::exclusion::{Bound, Branch, Certificate, Link, Part, Stress};
use super::implied::Accused;
use super::meaning::Axis;
use super::proposal::{name_of, printed};
use super::suspects::Blame;
use super::words;
use crate::checks::{Finding, Law, Level, Rule, Slip};
use crate::exact::Rational;
use crate::exact::order;
use crate::truss::{Edit, FigureId, JointId, Truss};
use num_traits::{Signed, Zero};

/// Figures or joints named in a sentence before it says how many more there are.
const MOST_NAMED: usize = 8;

/// The finding for a proof that the figures cannot close, with who may be to blame.
pub(crate) fn excluded(case: &Case, certificate: &Certificate, blame: &Blame) -> Finding {
    let text = match certificate {
        Certificate::Set(source) => {
            format!("{} disagrees with the set joints", name_of(case.truss, source.figure))
        }
        Certificate::Chain { axis, links } => chain_text(case, *axis, links),
        Certificate::Polygon { links } => polygon_text(case, links),
        Certificate::Stress(stress) => stress_text(case.truss, stress),
    };
    let mut finding = Finding::new(Rule::Excluded, Level::Fault, text).figures(figures(certificate));
    let mut joints: Vec<JointId> = finding.figures.iter().flat_map(|id| case.truss.figure(*id).kind.joints()).collect();
    order::sort(&mut joints);
    joints.dedup();
    finding = finding.joints(joints);
    finding = evidence(finding, case, certificate);
    blamed(finding, case.truss, blame, true)
}

/// The figures that a proof rests on.
pub(crate) fn figures(certificate: &Certificate) -> Vec<FigureId> {
    let mut figures: Vec<FigureId> = match certificate {
        Certificate::Set(source) => vec![source.figure],
        Certificate::Chain { links, .. } | Certificate::Polygon { links } => {
            links.iter().filter_map(|link| figure_of(link.bound)).collect()
        }
        Certificate::Stress(stress) => weights(&stress.branch).into_iter().map(|(figure, _)| figure).collect(),
    };
    let mut seen = Vec::new();
    figures.retain(|figure| {
        !seen.contains(figure) && {
            seen.push(*figure);
            true
        }
    });
    if figures.is_empty()
        && let Certificate::Stress(stress) = certificate
    {
        figures = stress.conditions.iter().map(|source| source.figure).collect();
        figures.dedup();
    }
    figures
}

fn figure_of(bound: Bound) -> Option<FigureId> {
    match bound {
        Bound::Figure(source) => Some(source.figure),
        Bound::Set => None,
    }
}

/// The heaviest multiplier of each figure over all branches, heaviest first.
fn weights(branch: &Branch) -> Vec<(FigureId, i128)> {
    let mut found: Vec<(FigureId, i128)> = Vec::new();
    let mut waiting = vec![branch];
    while let Some(branch) = waiting.pop() {
        match branch {
            Branch::Empty => {}
            Branch::Split { halves, .. } => waiting.extend(halves.iter()),
            Branch::Combined { multipliers, .. } => {
                for (part, weight) in multipliers {
                    let Part::Condition(source, _) = part else { continue };
                    match found.iter_mut().find(|(figure, _)| *figure == source.figure) {
                        Some(entry) if entry.1.abs() < weight.abs() => entry.1 = *weight,
                        Some(_) => {}
                        None => found.push((source.figure, *weight)),
                    }
                }
            }
        }
    }
    order::sort_by_key(&mut found, |(figure, weight)| (-weight.abs(), *figure));
    found
}

fn chain_text(case: &Case, axis: Axis, links: &[Link]) -> String {
    let steps: Vec<Rational> = links.iter().map(|link| greatest_step(case, axis, link).unwrap_or_default()).collect();
    let Some(overall) = (0..links.len()).max_by(|a, b| steps[*a].abs().cmp(&steps[*b].abs())) else {
        return String::new();
    };
    let sum: Rational = steps.iter().sum();
    let (what, size) = (if axis == Axis::X { "run" } else { "rise" }, |v: &Rational| near(case.truss, v));
    let others: Vec<&Link> = (1..links.len()).map(|k| &links[(overall + k) % links.len()]).collect();
    let marks =
        named(others.iter().map(|link| case.truss.mark(link.from)).chain([case.truss.mark(links[overall].from)]), "-");
    let total = &sum - &steps[overall];
    let ends = format!("{}-{}", case.truss.mark(links[overall].to), case.truss.mark(links[overall].from));
    // The chain leads from the overall's end back to its beginning and can grow by at most `total`.
    let needed = -&steps[overall];
    format!(
        "the string {marks} cannot be: its {what} is at most {}, and {ends} needs at least {} there: {} too little",
        size(&total),
        size(&needed),
        size(&sum.abs())
    )
}

/// A length to a fine step, as it is printed.
fn near(truss: &Truss, value: &Rational) -> String {
    words::length(truss, value, &words::fine_step(truss))
}

fn polygon_text(case: &Case, links: &[Link]) -> String {
    let size = |link: &Link| match link.bound {
        Bound::Figure(source) => {
            printed(case.truss.figure(source.figure)).map_or_else(String::new, |v| words::exact_length(case.truss, v))
        }
        Bound::Set => lengths(case, link).map_or_else(String::new, |l| near(case.truss, &l.middle())),
    };
    let [longest, others @ ..] = links else { return String::new() };
    let sum: Vec<String> = others.iter().map(size).collect();
    let marks = named(others.iter().map(|l| case.truss.mark(l.from)).chain([case.truss.mark(longest.to)]), "-");
    let shape =
        if links.len() == 3 { format!("panel {marks} cannot be a triangle") } else { format!("{marks} cannot reach") };
    format!("{shape}: {} < {}", sum.join(" + "), size(longest))
}

fn stress_text(truss: &Truss, stress: &Stress) -> String {
    let weights = weights(&stress.branch);
    if weights.is_empty() {
        let figures: Vec<FigureId> = stress.conditions.iter().map(|source| source.figure).collect();
        return format!("no place is left for the joints by {}", figure_names(truss, &figures));
    }
    let figures: Vec<FigureId> = weights.into_iter().map(|(figure, _)| figure).collect();
    format!("{} cannot all hold: no place of the joints comes near enough to them", figure_names(truss, &figures))
}

fn figure_names(truss: &Truss, figures: &[FigureId]) -> String {
    named(figures.iter().map(|id| truss.figure(*id).mark.as_str()), ", ")
}

/// Names in a row, the first few of them when there are many.
fn named<'a>(names: impl Iterator<Item = &'a str>, between: &str) -> String {
    let mut names: Vec<&str> = names.collect();
    names.dedup();
    match names.len() {
        n if n > MOST_NAMED && between == "-" => format!("{}-{}-…-{}", names[0], names[1], names[n - 1]),
        n if n > MOST_NAMED => format!("{} and {} more", names[..MOST_NAMED].join(between), n - MOST_NAMED),
        _ => names.join(between),
    }
}

fn evidence(mut finding: Finding, case: &Case, certificate: &Certificate) -> Finding {
    match certificate {
        Certificate::Set(_) => finding,
        Certificate::Chain { axis, links } => {
            let steps = links.iter().map(|link| (link, greatest_step(case, *axis, link).unwrap_or_default()));
            let terms: Vec<String> =
                steps.map(|(link, step)| format!("{} ≤ {step}", source_name(case.truss, link))).collect();
            for term in terms.iter().take(4 * MOST_NAMED) {
                finding = finding.words(term.clone());
            }
            let sum: Rational = links.iter().filter_map(|link| greatest_step(case, *axis, link)).sum();
            finding.formula(
                Law::Sum,
                format!("round the chain the coordinate would grow by at most {sum}, but it has to come back to 0"),
            )
        }
        Certificate::Polygon { links } => polygon_evidence(finding, case, links),
        Certificate::Stress(stress) => stress_evidence(finding, case.truss, stress),
    }
}

fn polygon_evidence(finding: Finding, case: &Case, links: &[Link]) -> Finding {
    let known: Vec<_> = links.iter().filter_map(|link| lengths(case, link)).collect();
    let [longest, others @ ..] = known.as_slice() else { return finding };
    let reach: Rational = others.iter().map(|l| l.hi().clone()).sum();
    let text = format!("the longest side is at least {}, the others together at most {reach}", longest.lo());
    match others {
        [a, b] => {
            let (q1, q2, q3) = (a.hi() * a.hi(), b.hi() * b.hi(), longest.lo() * longest.lo());
            let value = crate::exact::archimedes(&q1, &q2, &q3);
            finding.words(text).formula(Law::Archimedes, format!("4·{q1}·{q2} − ({q1} + {q2} − {q3})² = {value} < 0"))
        }
        _ => finding.words(text),
    }
}

fn source_name(truss: &Truss, link: &Link) -> String {
    let ends = format!("{}-{}", truss.mark(link.from), truss.mark(link.to));
    match link.bound {
        Bound::Figure(source) => format!("{ends} ({})", truss.figure(source.figure).mark),
        Bound::Set => format!("{ends} (set)"),
    }
}

fn stress_evidence(mut finding: Finding, truss: &Truss, stress: &Stress) -> Finding {
    let weights = weights(&stress.branch);
    let heaviest = weights.first().map_or(1, |(_, weight)| weight.abs().max(1));
    finding = finding.words(
        "the figures are combined with these multipliers (a stress of the over-figured frame); in boxes that hold every \
         admissible place the combination cannot reach what the figures allow",
    );
    for (figure, weight) in weights.iter().take(2 * MOST_NAMED) {
        let share = Rational::new((*weight).into(), heaviest.into());
        let share = words::plain(&words::rounded(&share, &crate::exact::ratio(1, 1000)));
        finding = finding.value(name_of(truss, *figure), share);
    }
    let (boxes, splits) = count(&stress.branch);
    if splits > 0 { finding.words(format!("{boxes} boxes, after {splits} splits, each excluded")) } else { finding }
}

/// Boxes and splits of a proof.
fn count(branch: &Branch) -> (usize, usize) {
    let (mut boxes, mut splits) = (0, 0);
    let mut waiting = vec![branch];
    while let Some(branch) = waiting.pop() {
        match branch {
            Branch::Split { halves, .. } => {
                splits += 1;
                waiting.extend(halves.iter());
            }
            _ => boxes += 1,
        }
    }
    (boxes, splits)
}

/// Adds who may be to blame, and the mend of the likeliest.
pub(crate) fn blamed(mut finding: Finding, truss: &Truss, blame: &Blame, is_proved: bool) -> Finding {
    if let [first, others @ ..] = blame.singles.as_slice() {
        let sure = if others.is_empty() && blame.complete && is_proved {
            "is the figure that is wrong"
        } else {
            "may be the figure that is wrong"
        };
        finding.text = format!(
            "{}; {} {sure}: {}",
            finding.text,
            truss.figure(first.suspect.figure).mark,
            should_read(truss, first)
        );
        for accused in &blame.singles {
            finding = finding.words(format!(
                "without {} all the others close: {}",
                name_of(truss, accused.suspect.figure),
                should_read(truss, accused)
            ));
        }
        let mend = format!("let {} read {}", truss.figure(first.suspect.figure).mark, first.suspect.implied);
        return finding.mend(mend, Some(first.proposal.edit.clone()));
    }
    for pair in &blame.pairs {
        let [a, b] =
            pair.each_ref().map(|accused| (name_of(truss, accused.suspect.figure), should_read(truss, accused)));
        finding = finding.words(format!("without {} and {} the others close: {}; {}", a.0, b.0, a.1, b.1));
    }
    if let Some([a, b]) = blame.pairs.first() {
        let marks = [a, b].map(|accused| truss.figure(accused.suspect.figure).mark.as_str());
        finding.text =
            format!("{}; no single figure is to blame, {} and {} together may be", finding.text, marks[0], marks[1]);
        let text = format!("let {} read {} and {} read {}", marks[0], a.suspect.implied, marks[1], b.suspect.implied);
        return finding.mend(text, Some(Edit::All(vec![a.proposal.edit.clone(), b.proposal.edit.clone()])));
    }
    let told = if blame.complete {
        "no single figure and no pair tried is to blame alone"
    } else {
        "the search for the wrong figure reached its bound, or was stopped"
    };
    finding.words(told)
}

/// `it should read 6'-3" (digits swapped)`.
fn should_read(truss: &Truss, accused: &Accused) -> String {
    let suspect = &accused.suspect;
    if truss.figure(suspect.figure).kind.is_relation() {
        return format!("the others make it {}", suspect.implied);
    }
    let slip = suspect.slip.map_or(String::new(), |slip: Slip| format!(" ({})", slip.name()));
    format!("it should read {}{slip}", suspect.implied)
}

/// The finding when nothing was proved: the places that come nearest, and the figures that are furthest off there.
pub(crate) fn best_misfit(truss: &Truss, worst: &[(FigureId, Rational)], blame: &Blame) -> Finding {
    let names: Vec<String> = worst.iter().take(3).map(|(id, _)| name_of(truss, *id)).collect();
    let text = match names.as_slice() {
        [] => "no layout was found, and no proof that there is none".to_string(),
        names => format!(
            "no layout was found, and no proof that there is none; the nearest places miss {}",
            names.join("; ")
        ),
    };
    let mut finding = Finding::new(Rule::BestMisfit, Level::Caution, text).figures(worst.iter().map(|(id, _)| *id));
    for (id, by) in worst.iter().filter(|(_, by)| !by.is_zero()).take(MOST_NAMED) {
        finding = finding.value(name_of(truss, *id), near(truss, by));
    }
    blamed(finding, truss, blame, false)
}
