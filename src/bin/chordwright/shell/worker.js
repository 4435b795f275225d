// Runs in the worker, after the glue: the other end of `chordwrightWorker` (see boot.js).
onmessage = ({ data: { module, id, text } }) => {
  if (module) {
    wasm_bindgen.initSync({ module });
    return;
  }
  try {
    postMessage({ id, text: wasm_bindgen.worker_message(text) });
  } catch (error) {
    postMessage({ id, error: String(error) });
    close();
  }
};
