//! What changed between two reports: applied to the old one it gives the new one, after any edit.

mod close_help;
mod trusses;

use chordwright::checks::{Changes, Limits, Report, report};
use chordwright::exact::ratio;
use chordwright::measure::Written;
use chordwright::truss::{Edit, Joint, JointId, MemberId, Selection, Truss};
use close_help::generate::Dice;
use trusses::{lattice, long_truss};

fn asked(truss: &Truss) -> Report {
    report(truss, &Limits::default())
}

/// A small edit of some kind, as a drafter makes it.
fn edit(truss: &Truss, dice: &mut Dice) -> Edit {
    let joint = JointId::new(dice.below(truss.joints.len()));
    let mut moved = truss.joint(joint).clone();
    match dice.below(6) {
        0..=2 => {
            let by = ratio(dice.between(-40, 40), 16);
            moved.x = Written::plain(&moved.x.value + &by);
            moved.y = Written::plain(&moved.y.value - ratio(dice.between(-40, 40), 7));
            Edit::SetJoint(joint, moved)
        }
        3 => {
            moved.loose = !moved.loose;
            Edit::SetJoint(joint, moved)
        }
        4 => {
            let member = MemberId::new(dice.below(truss.members.len()));
            Edit::Remove(Selection { members: vec![member], ..Selection::default() })
        }
        _ => {
            let [x, y] = [0, 0].map(|_: i32| Written::plain(ratio(dice.between(-500, 500), 3)));
            Edit::AddJoint(Joint { mark: truss.free_joint_mark("N"), x, y, loose: false })
        }
    }
}

#[test]
fn the_changes_lead_from_the_old_report_to_the_new_one() {
    let mut dice = Dice::new(3);
    let mut passed_on = 0;
    for start in [long_truss(12), lattice(4)] {
        let (mut truss, mut old) = (start.clone(), asked(&start));
        for step in 0..150 {
            let Ok(next) = truss.edited(&edit(&truss, &mut dice)) else { continue };
            let new = asked(&next);
            let same_size = next.joints.len() == truss.joints.len() && next.members.len() == truss.members.len();
            match Changes::between(&old, &new) {
                Some(changes) => {
                    passed_on += 1;
                    assert_eq!(changes.applied(&old).as_ref(), Some(&new), "edit {step}");
                }
                None => assert!(!same_size, "edit {step}: reports of one size have changes between them"),
            }
            (truss, old) = (next, new);
        }
    }
    assert!(passed_on > 100, "{passed_on}");
}

#[test]
fn changes_that_do_not_fit_are_refused() {
    let [small, large] = [long_truss(3), long_truss(9)].map(|truss| asked(&truss));
    assert_eq!(Changes::between(&small, &large), None);
    let mut moved = long_truss(9);
    let last = moved.joints.len() - 1;
    moved.joints[last].x = Written::plain(ratio(100_000, 3));
    let changes = Changes::between(&large, &asked(&moved)).expect("one size");
    assert_eq!(changes.applied(&small), None, "rows beyond its end");
}
