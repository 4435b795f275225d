// Runs in the worker, after the glue: the other end of `chordwrightWorker` (see boot.js).
onmessage = ({ data: { module, id, data } }) => {
  if (module) {
    wasm_bindgen.initSync({ module });
    return;
  }
  // Nobody needs to be told more often, and short work not at all.
  let told = performance.now();
  const tell = (...progress) => {
    const now = performance.now();
    if (now - told < 150) return;
    told = now;
    postMessage({ id, progress });
  };
  try {
    postMessage({ id, data: wasm_bindgen.worker_message(data, tell) });
  } catch (error) {
    postMessage({ id, error: String(error) });
    close();
  }
};
