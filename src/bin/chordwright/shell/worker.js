// Runs in the worker, after the glue: the other end of `chordwrightWorker` (see boot.js).
onmessage = ({ data: { module, id, data } }) => {
  if (module) {
    wasm_bindgen.initSync({ module });
    return;
  }
  try {
    postMessage({ id, data: wasm_bindgen.worker_message(data) });
  } catch (error) {
    postMessage({ id, error: String(error) });
    close();
  }
};
