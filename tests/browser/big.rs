//! Large trusses under the hand: few elements, and a drag that touches only what moves. What each frame costs is printed
//! (`--nocapture`), not judged.

use crate::support::Page;
use crate::trusses::long_truss;
use chordwright::exchange::write_truss;

/// Drags the selected joint about, one move a frame. Gives the changes that the drawing saw meanwhile, the milliseconds of
/// work in a frame and between frames (medians), of the drop, and until the answers to it.
const DRAG: &str = r#"
  const board = document.querySelector('#board');
  const ring = document.querySelector('path.selected-ring').getBoundingClientRect();
  const [x, y] = [ring.left + ring.width / 2, ring.top + ring.height / 2];
  const fire = (type, dx, dy) => board.dispatchEvent(new PointerEvent(type, {
    pointerId: 7, pointerType: 'mouse', button: 0, buttons: 1, clientX: x + dx, clientY: y + dy, bubbles: true }));
  const frame = () => new Promise(requestAnimationFrame);
  const turn = () => new Promise((done) => {
    const channel = new MessageChannel();
    channel.port1.onmessage = done;
    channel.port2.postMessage(0);
  });
  let changes = 0, moved = 0;
  const watcher = new MutationObserver((seen) => { changes += seen.length; });
  const work = [], between = [];
  fire('pointerdown', 0, 0);
  fire('pointermove', 6, -6);
  await turn();
  watcher.observe(document.querySelector('#board .drawing'), { subtree: true, childList: true, attributes: true });
  let last = await frame();
  for (let i = 0; i < 40; i++) {
    const begin = performance.now();
    fire('pointermove', 6 + i / 4, -6 - i / 4);
    await turn();
    work.push(performance.now() - begin);
    moved += document.querySelectorAll('.overlay path.ghost').length > 0;
    const now = await frame();
    between.push(now - last);
    last = now;
  }
  watcher.disconnect();
  const begin = performance.now();
  fire('pointerup', 16, -16);
  await turn();
  const drop = performance.now() - begin;
  for (let i = 0; i < 30 && !document.querySelector('.answer.stale'); i++) await frame();
  while (document.querySelector('.answer.stale')) await new Promise((done) => setTimeout(done, 4));
  const answered = performance.now() - begin;
  const middle = (list) => list.sort((a, b) => a - b)[Math.floor(list.length / 2)];
  return { changes, moved, work: middle(work), between: middle(between), drop, answered };
"#;

#[test]
#[ignore = "needs the built page and Chromium: cargo verify"]
fn a_drag_touches_only_what_moves_however_large_the_truss() {
    for members in [500, 2_000, 20_000] {
        let page = Page::open();
        page.drop_file(".page", "big.truss.json", &write_truss(&long_truss(members / 4 - 1)));
        page.wait_for(".answer");
        page.wait_for_none(".answer.stale");
        page.wait_for_none(".sign.waiting");
        assert!(page.count("#board *") < 800, "{members} members: {} elements", page.count("#board *"));
        page.click("#board");
        page.press("n");
        page.wait_for("path.selected-ring");
        let seen = page.run(DRAG, &[]);
        println!("{members} members: {seen}");
        assert_eq!(seen["changes"], 0, "the drawing stands still while a joint is dragged: {seen}");
        assert_eq!(seen["moved"], 40, "and what moves is shown in every frame: {seen}");
        page.wait_for("#undo:not([disabled])");
        page.assert_quiet();
    }
}
