//! What the shop cuts from: how deep each kind of member is, and where the working line lies in it.

use crate::exact::{Rational, fraction, ratio, whole};
use crate::measure::Unit;
use crate::truss::Role;
use num_traits::{Signed, Zero};
use serde::{Deserialize, Serialize};

/// The settings of the shop, in the sheet's unit.
#[derive(Clone, Debug, PartialEq, Eq, Serialize, Deserialize)]
#[serde(default, deny_unknown_fields)]
pub struct Shop {
    /// What pieces of the top chord are cut from.
    #[serde(rename = "top chord")]
    pub top_chord: Stock,
    /// What pieces of the bottom chord are cut from.
    #[serde(rename = "bottom chord")]
    pub bottom_chord: Stock,
    /// What webs are cut from.
    pub web: Stock,
    /// What posts are cut from.
    pub post: Stock,
    /// What anything else is cut from.
    pub other: Stock,
    /// The gap left at each end, square to the edge of what runs through there.
    #[serde(with = "fraction")]
    pub gap: Rational,
}

/// What a member is cut from.
#[derive(Clone, Debug, PartialEq, Eq, Serialize, Deserialize)]
#[serde(deny_unknown_fields)]
pub struct Stock {
    /// Its depth: the distance between its two edges on the drawing. One that is not positive stands for the bare working
    /// line.
    #[serde(with = "fraction")]
    pub depth: Rational,
    /// Where the working line lies in the depth.
    pub line: Line,
}

/// Where the working line lies in the depth of a member. The lower edge of an upright member is its right one.
#[derive(Clone, Debug, Default, PartialEq, Eq, Serialize, Deserialize)]
#[serde(rename_all = "lowercase")]
pub enum Line {
    /// Midway.
    #[default]
    Centre,
    /// Along the upper or left edge.
    Top,
    /// Along the lower or right edge.
    Bottom,
    /// At this distance from the lower or right edge.
    Gauge(#[serde(with = "fraction")] Rational),
}

impl Shop {
    /// The usual settings on a sheet in `unit`: all members of one depth, working lines midway, no gap. The depth is 3 1/2 in
    /// (a nominal 4 in) or 90 mm: common practice.
    pub fn usual(unit: Unit) -> Shop {
        let depth = match unit.is_imperial() {
            true => ratio(7, 2) * Unit::In.in_units_of(unit),
            false => whole(90) * Unit::Mm.in_units_of(unit),
        };
        Shop::all_of(Stock { depth, line: Line::Centre })
    }

    /// Every member cut from one stock, without a gap.
    pub fn all_of(stock: Stock) -> Shop {
        Shop {
            top_chord: stock.clone(),
            bottom_chord: stock.clone(),
            web: stock.clone(),
            post: stock.clone(),
            other: stock,
            gap: Rational::zero(),
        }
    }

    /// What members of a role are cut from.
    pub fn stock(&self, role: Role) -> &Stock {
        match role {
            Role::TopChord => &self.top_chord,
            Role::BottomChord => &self.bottom_chord,
            Role::Web => &self.web,
            Role::Post => &self.post,
            Role::Other => &self.other,
        }
    }

    /// The same, to be changed.
    pub fn stock_mut(&mut self, role: Role) -> &mut Stock {
        match role {
            Role::TopChord => &mut self.top_chord,
            Role::BottomChord => &mut self.bottom_chord,
            Role::Web => &mut self.web,
            Role::Post => &mut self.post,
            Role::Other => &mut self.other,
        }
    }
}

impl Default for Shop {
    /// The usual settings on a sheet in inches.
    fn default() -> Shop {
        Shop::usual(Unit::In)
    }
}

impl Stock {
    /// The depth that counts: never negative.
    pub(super) fn depth(&self) -> Rational {
        if self.depth.is_positive() { self.depth.clone() } else { Rational::zero() }
    }

    /// How far the lower (right) and the upper (left) edge lie above (to the left of) the working line.
    pub(super) fn edges(&self) -> [Rational; 2] {
        let depth = self.depth();
        let below = match &self.line {
            Line::Centre => &depth / whole(2),
            Line::Top => depth.clone(),
            Line::Bottom => Rational::zero(),
            Line::Gauge(gauge) => gauge.clone(),
        };
        [-&below, depth - below]
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn edges_lie_a_depth_apart_wherever_the_line_is() {
        let edges = |line| Stock { depth: whole(4), line }.edges();
        assert_eq!(edges(Line::Centre), [whole(-2), whole(2)]);
        assert_eq!(edges(Line::Top), [whole(-4), whole(0)]);
        assert_eq!(edges(Line::Bottom), [whole(0), whole(4)]);
        assert_eq!(edges(Line::Gauge(whole(1))), [whole(-1), whole(3)]);
        assert_eq!(Stock { depth: whole(-4), line: Line::Centre }.edges(), [whole(0), whole(0)]);
    }

    #[test]
    fn usual_depths_are_one_size_in_every_unit() {
        let depth = |unit| Shop::usual(unit).web.depth * Unit::in_millimetres(unit);
        assert_eq!(depth(Unit::In), depth(Unit::Ft));
        assert_eq!([Unit::Mm, Unit::Cm, Unit::M].map(depth), [whole(90), whole(90), whole(90)]);
    }

    #[test]
    fn settings_read_as_they_are_written() {
        let mut shop = Shop::usual(Unit::In);
        shop.stock_mut(Role::Web).line = Line::Gauge(ratio(5, 4));
        let text = serde_json::to_string(&shop).expect("settings are plain");
        assert!(text.contains(r#""top chord":{"depth":"7/2","line":"centre"}"#), "{text}");
        assert_eq!(serde_json::from_str::<Shop>(&text).expect("as written"), shop);
        assert_eq!(serde_json::from_str::<Shop>("{}").expect("all usual"), Shop::default());
    }
}
