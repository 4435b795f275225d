//! Strings as printed: the trade expects a chain of runs (or rises) to add up to its overall exactly as printed.
//!
//! Independent of the figures' intervals: seven panels at 5'-8 9/16" make 39'-11 15/16", one sixteenth short of 40'-0",
//! although they close.

use super::meaning::Axis;
use super::proposal::proposal;
use super::words;
use crate::checks::{Finding, Law, Level, Rule};
use crate::exact::order;
use crate::exact::{Rational, whole};
use crate::truss::{Edit, FigureId, FigureKind, JointId, Truss};
use num_traits::{Signed, ToPrimitive, Zero};
use std::collections::{HashMap, VecDeque};

/// Links looked at in all while chains are searched.
const MOST_LINKS: usize = 1_000_000;

/// A figure along an axis, turned so that its value is positive.
#[derive(Clone)]
struct Link {
    figure: FigureId,
    from: JointId,
    to: JointId,
    size: Rational,
}

/// A caution for every string that does not add up to its overall as printed, although it may close.
pub(crate) fn short_strings(truss: &Truss) -> Vec<Finding> {
    let mut work = MOST_LINKS;
    [Axis::X, Axis::Y].into_iter().flat_map(|axis| along(truss, axis, &mut work)).collect()
}

fn along(truss: &Truss, axis: Axis, work: &mut usize) -> Vec<Finding> {
    let links: Vec<Link> = (0..truss.figures.len()).filter_map(|i| link(truss, FigureId::new(i), axis)).collect();
    let mut leaving: HashMap<JointId, Vec<usize>> = HashMap::new();
    for (index, link) in links.iter().enumerate() {
        leaving.entry(link.from).or_default().push(index);
    }
    let check = |overall: usize| {
        let chain = chain_under(&links, &leaving, overall, work)?;
        finding(truss, axis, &links[overall], chain.iter().map(|index| &links[*index]).collect())
    };
    (0..links.len()).filter_map(check).collect()
}

fn link(truss: &Truss, figure: FigureId, axis: Axis) -> Option<Link> {
    let (from, to, value) = match (&truss.figure(figure).kind, axis) {
        (FigureKind::Run { from, to, value }, Axis::X) | (FigureKind::Rise { from, to, value }, Axis::Y) => {
            (*from, *to, &value.value)
        }
        _ => return None,
    };
    let size = value.abs();
    match value {
        v if v.is_zero() => None,
        v if v.is_positive() => Some(Link { figure, from, to, size }),
        _ => Some(Link { figure, from: to, to: from, size }),
    }
}

/// The chain of the fewest smaller links between the ends of an overall, by a search in breadth.
fn chain_under(
    links: &[Link],
    leaving: &HashMap<JointId, Vec<usize>>,
    overall: usize,
    work: &mut usize,
) -> Option<Vec<usize>> {
    let (start, end, size) = (links[overall].from, links[overall].to, &links[overall].size);
    let mut reached: HashMap<JointId, usize> = HashMap::new();
    let mut waiting = VecDeque::from([start]);
    while let Some(joint) = waiting.pop_front() {
        for &index in leaving.get(&joint).into_iter().flatten() {
            *work = work.checked_sub(1)?;
            let link = &links[index];
            if index == overall || link.size >= *size || link.to == start || reached.contains_key(&link.to) {
                continue;
            }
            reached.insert(link.to, index);
            if link.to == end {
                return Some(path_back(links, &reached, start, end));
            }
            waiting.push_back(link.to);
        }
    }
    None
}

fn path_back(links: &[Link], reached: &HashMap<JointId, usize>, start: JointId, end: JointId) -> Vec<usize> {
    let (mut path, mut at) = (Vec::new(), end);
    while at != start {
        let Some(&index) = reached.get(&at) else { break };
        path.push(index);
        at = links[index].from;
    }
    path.reverse();
    path
}

fn finding(truss: &Truss, axis: Axis, overall: &Link, chain: Vec<&Link>) -> Option<Finding> {
    let sum: Rational = chain.iter().map(|link| &link.size).sum();
    let gap = &overall.size - &sum;
    let half = |link: &Link| truss.step_of(truss.figure(link.figure)) / whole(2);
    let room: Rational = chain.iter().map(|link| half(link)).sum::<Rational>() + half(overall);
    // Beyond the intervals it is no matter of rounding: then the figures do not close, and that is said instead.
    if gap.is_zero() || gap.abs() > room {
        return None;
    }
    let what = if axis == Axis::X { "run" } else { "rise" };
    let sense = if gap.is_positive() { "short" } else { "long" };
    let marks = marks_along(truss, &chain);
    let size = |value: &Rational| words::exact_length(truss, value);
    let text = format!(
        "the {what} string {marks} adds up to {}, {} {sense} of the overall {}",
        size(&sum),
        size(&gap.abs()),
        size(&overall.size)
    );
    let sizes: Vec<String> = chain.iter().map(|link| size(&link.size)).collect();
    let formula = format!("{} = {}, overall {}", sizes.join(" + "), size(&sum), size(&overall.size));
    let joints = std::iter::once(overall.from).chain(chain.iter().map(|link| link.to));
    let figures = chain.iter().map(|link| link.figure).chain([overall.figure]);
    let finding = Finding::new(Rule::StringShort, Level::Caution, text)
        .joints(joints)
        .figures(figures)
        .formula(Law::Sum, formula);
    Some(match mended(truss, &chain, &gap) {
        Some((text, edit)) => finding.mend(text, edit),
        None => finding,
    })
}

/// `L0-L1-L2`, shortened in the middle when it is long.
fn marks_along(truss: &Truss, chain: &[&Link]) -> String {
    let mut marks: Vec<&str> = chain.first().map(|link| truss.mark(link.from)).into_iter().collect();
    marks.extend(chain.iter().map(|link| truss.mark(link.to)));
    match marks.as_slice() {
        [first, second, .., last] if marks.len() > 8 => format!("{first}-{second}-…-{last}"),
        _ => marks.join("-"),
    }
}

/// The roundings that add up: a step more (or less) on as many links as the gap has steps, symmetric where it can be.
/// Between set joints the changed figures would stray from the places, so there it is said but not offered as an edit.
fn mended(truss: &Truss, chain: &[&Link], gap: &Rational) -> Option<(String, Option<Edit>)> {
    let step = truss.step_of(truss.figure(chain[0].figure));
    if !step.is_positive() || chain.iter().any(|link| truss.step_of(truss.figure(link.figure)) != step) {
        return None;
    }
    let steps = gap / &step;
    let count = steps.is_integer().then(|| steps.abs().to_integer().to_usize())?.filter(|n| *n <= chain.len())?;
    let change = if gap.is_positive() { step } else { -step };
    let chosen = spread_evenly(chain, count);
    let mut texts: Vec<String> = Vec::new();
    let edits = chain.iter().zip(&chosen).map(|(link, chosen)| {
        let size = if *chosen { &link.size + &change } else { link.size.clone() };
        texts.push(words::exact_length(truss, &size));
        let signed = if printed_sign(truss, link.figure) { -size } else { size };
        chosen.then(|| proposal(truss, link.figure, &signed).edit)
    });
    let edits: Vec<Edit> = edits.flatten().collect();
    let is_free = |link: &&Link| truss.joint(link.from).loose || truss.joint(link.to).loose;
    let edit = chain.iter().all(is_free).then_some(Edit::All(edits));
    Some((format!("let the string read {}", texts.join(", ")), edit))
}

/// True when the figure is printed with a minus.
fn printed_sign(truss: &Truss, id: FigureId) -> bool {
    super::proposal::printed(truss.figure(id)).is_some_and(Signed::is_negative)
}

/// Which links take a step: those with the largest remainders of their fair share, ties spread symmetrically about the
/// centre line; equal links take it at the centre first.
fn spread_evenly(chain: &[&Link], count: usize) -> Vec<bool> {
    let n = chain.len();
    let from_centre = |i: usize| (2 * i + 1).abs_diff(n);
    // The fair share of a link grows with its size, so the largest links have the largest remainders.
    let mut order: Vec<usize> = (0..n).collect();
    order::sort_by(&mut order, |&i, &k| {
        chain[k].size.cmp(&chain[i].size).then(from_centre(i).cmp(&from_centre(k))).then(i.cmp(&k))
    });
    if n % 2 == 1 && count.is_multiple_of(2) && chain.iter().all(|link| link.size == chain[0].size) {
        order.retain(|&i| i != n / 2);
        order.push(n / 2);
    }
    let mut chosen = vec![false; n];
    order.into_iter().take(count).for_each(|i| chosen[i] = true);
    chosen
}
