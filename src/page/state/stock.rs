//! What pieces are cut from, as it is typed: `web 3 1/2"`, `top chord 5 1/2" top`, `all 90 mm`, `gap 1/8"`.

use crate::checks::pieces::{Line, Shop, Stock};
use crate::measure::parse_length;
use crate::truss::{Role, Truss};
use num_traits::Signed;

/// The settings with what a line says.
///
/// # Errors
///
/// What was expected.
pub(super) fn read_stock(shop: &Shop, truss: &Truss, text: &str) -> Result<Shop, String> {
    let text = text.trim();
    let length = |text: &str| parse_length(text, truss.unit).map_err(|error| error.to_string());
    let mut next = shop.clone();
    if let Some(gap) = text.strip_prefix("gap ") {
        next.gap = length(gap)?;
        return if next.gap.is_negative() { Err("a gap cannot be less than 0".into()) } else { Ok(next) };
    }
    let (roles, rest) = match text.strip_prefix("all ") {
        Some(rest) => (Role::ALL.to_vec(), rest),
        None => {
            let named = Role::ALL.into_iter().find_map(|role| Some((role, text.strip_prefix(role.name())?)));
            let (role, rest) = named.ok_or("expected a role and its depth, such as web 3 1/2\", or gap 1/8\"")?;
            (vec![role], rest)
        }
    };
    let rest = rest.trim();
    let lines = [("centre", Line::Centre), ("top", Line::Top), ("bottom", Line::Bottom)];
    let (depth, line) = match lines.into_iter().find_map(|(name, line)| Some((rest.strip_suffix(name)?, line))) {
        Some((depth, line)) => (depth, line),
        None => match rest.split_once(" gauge ") {
            Some((depth, gauge)) => (depth, Line::Gauge(length(gauge)?)),
            None => (rest, Line::Centre),
        },
    };
    let depth = length(depth.trim())?;
    if depth.is_negative() {
        return Err("a depth cannot be less than 0".into());
    }
    for role in roles {
        *next.stock_mut(role) = Stock { depth: depth.clone(), line: line.clone() };
    }
    Ok(next)
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::exact::{ratio, whole};

    #[test]
    fn a_line_says_what_a_role_is_cut_from() {
        let truss = Truss::default();
        let read = |text: &str| read_stock(&Shop::default(), &truss, text);
        let top = read("top chord 5 1/2\" top").expect("a stock").top_chord;
        assert_eq!(top, Stock { depth: ratio(11, 2), line: Line::Top });
        assert_eq!(read("web 4 gauge 1 1/4").expect("a stock").web.line, Line::Gauge(ratio(5, 4)));
        assert_eq!(read("all 90 mm").expect("a stock").post.depth, whole(90) / ratio(254, 10));
        assert_eq!(read("gap 1/8\"").expect("a gap").gap, ratio(1, 8));
        for wrong in ["", "beam 4", "web", "web four", "gap -1", "web -2", "all"] {
            assert!(read(wrong).is_err(), "{wrong}");
        }
    }
}
