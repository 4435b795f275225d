//! Usual configurations: every one stands, is clear, and its figures close.

use chordwright::checks::{ClearState, CloseState, Level, Limits, StandsState, report};
use chordwright::exact::{Rational, ratio, whole};
use chordwright::measure::{Unit, Written};
use chordwright::truss::{Configuration, Measures, Role, Truss, configured};

fn measures(panels: usize) -> Measures {
    Measures { span: whole(480), panels, height: whole(96), heel: whole(0), other: whole(24), figured: true }
}

fn laid_out(configuration: Configuration, m: &Measures) -> Truss {
    let m = match configuration {
        Configuration::NorthLight => Measures { other: &m.span * ratio(1, m.panels as i64), ..m.clone() },
        _ => m.clone(),
    };
    configured(configuration, &m, Unit::In, &Written { text: "1/16".into(), value: ratio(1, 16) })
        .unwrap_or_else(|error| panic!("{}: {error}", configuration.name()))
}

#[test]
fn every_configuration_stands_is_clear_and_its_figures_close() {
    for configuration in Configuration::ALL {
        for panels in [4, 6, 8, 10, 14] {
            for heel in [0, 12] {
                let truss = laid_out(configuration, &Measures { heel: whole(heel), ..measures(panels) });
                let what = format!("{}, {panels} panels, heel {heel}", configuration.name());
                assert_eq!(truss.problems(), Vec::new(), "{what}");
                let answers = report(&truss, &Limits::default());
                assert_eq!(
                    answers.answers.stands.state,
                    StandsState::Rigid,
                    "{what}: {}",
                    answers.answers.stands.summary
                );
                // A K has webs on both sides of its middle post: one more than it needs.
                let spare = usize::from(configuration == Configuration::K);
                assert_eq!(answers.answers.stands.spare_members, spare, "{what}: just enough members");
                assert_eq!(answers.answers.clear.state, ClearState::Clear, "{what}: {}", answers.answers.clear.summary);
                assert_eq!(
                    answers.answers.close.state,
                    CloseState::Closes,
                    "{what}: {}",
                    answers.answers.close.summary
                );
                let faults: Vec<&str> =
                    answers.findings.iter().filter(|f| f.level == Level::Fault).map(|f| f.text.as_str()).collect();
                assert!(faults.is_empty(), "{what}: {faults:?}");
                assert!(truss.members.iter().any(|member| member.role == Role::TopChord), "{what}");
            }
        }
    }
}

#[test]
fn panels_that_are_no_fraction_of_the_step_are_exact() {
    let truss = laid_out(Configuration::Warren, &Measures { panels: 7, ..measures(4) });
    let third = truss.joint_marked("L3").expect("a joint");
    assert_eq!(truss.joint(third).x.value, ratio(3 * 480, 7), "three sevenths of the span");
}

#[test]
fn loose_joints_find_their_places_again_from_the_figures_alone() {
    for configuration in Configuration::ALL {
        let mut truss = laid_out(configuration, &measures(6));
        let points: Vec<_> = truss.joints.iter().map(|joint| joint.point()).collect();
        for joint in truss.joints.iter_mut().skip(1) {
            joint.loose = true;
        }
        let answers = report(&truss, &Limits::default());
        assert_eq!(answers.answers.close.state, CloseState::Closes, "{}", configuration.name());
        let layout = answers.answers.close.layout.expect("a layout");
        for (place, point) in layout.iter().zip(&points) {
            let off = (place - point).quadrance();
            assert!(off < ratio(1, 4), "{}: {off}", configuration.name());
        }
    }
}

#[test]
fn measures_that_make_no_truss_are_refused_with_what_was_expected() {
    let refused = |configuration, m: Measures| {
        configured(configuration, &m, Unit::In, &Written::plain(whole(0))).expect_err("no truss")
    };
    let zero = Rational::from_integer(0.into());
    for (configuration, m, part) in [
        (Configuration::Pratt, Measures { span: zero.clone(), ..measures(4) }, "the span"),
        (Configuration::Pratt, Measures { height: whole(-5), ..measures(4) }, "the height"),
        (Configuration::Pratt, measures(5), "an even number"),
        (Configuration::Pratt, measures(0), "expected 2 to 400"),
        (Configuration::Warren, measures(401), "expected 2 to 400"),
        (Configuration::K, measures(2), "expected 4 to 400"),
        (Configuration::PrattGable, Measures { heel: whole(96), ..measures(4) }, "less than the height"),
        (Configuration::Scissors, Measures { other: whole(96), ..measures(4) }, "less than the height"),
        (Configuration::Cambered, Measures { other: zero, ..measures(4) }, "the camber"),
        (Configuration::NorthLight, Measures { other: whole(7), ..measures(4) }, "a whole number of panels"),
    ] {
        let error = refused(configuration, m);
        assert!(error.contains(part), "{error}");
    }
}
