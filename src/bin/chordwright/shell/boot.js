// Starts the page: unpacks the program that this file carries, compiles it and runs it.
//
// It also gives the program its worker: `chordwrightWorker()` returns a new Worker that holds the same program. Post it
// `{ id, data }`; it calls the program's `worker_message(data, tell)` and posts `{ id, data }` back with the answer, before
// it now and then `{ id, progress: [stage, done, of] }` when that takes long, or
// `{ id, error }` if the program stopped, after which that worker is finished and a new one is to be made. Messages are
// answered in the order in which they came. To give up an answer, `terminate()` the worker.
{
  const text = (id) => document.getElementById(id).textContent;
  let workerAddress;

  const program = () => {
    const packed = document.getElementById("wasm");
    const bytes = Uint8Array.from(atob(packed.textContent.trim()), (letter) => letter.charCodeAt(0));
    return unpack(bytes, Number(packed.dataset.size));
  };

  const provideWorkers = (module) => {
    globalThis.chordwrightWorker = () => {
      workerAddress ??= URL.createObjectURL(new Blob([text("glue"), text("worker")], { type: "text/javascript" }));
      const worker = new Worker(workerAddress);
      worker.postMessage({ module });
      return worker;
    };
  };

  const start = async () => {
    const module = await WebAssembly.compile(program());
    provideWorkers(module);
    await wasm_bindgen({ module_or_path: module });
  };

  // A program that stopped cannot go on, and whoever works with it has to know.
  const stopped = (error) => {
    if (error instanceof WebAssembly.RuntimeError) document.getElementById("stopped").hidden = false;
  };
  addEventListener("error", (event) => stopped(event.error));
  addEventListener("unhandledrejection", (event) => stopped(event.reason));

  start().catch((error) => {
    const starting = document.getElementById("starting");
    if (starting) starting.textContent = `This page could not start here. It needs a current browser. (${error})`;
    throw error;
  });
}
