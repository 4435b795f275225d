// Runs the tests of a test program that was compiled for the browser, after its glue, with what `wasm-bindgen-test`
// expects to find around it: an element for its lines, and word of everything that is written to the console.
globalThis.__wbg_test_invoke = (test) => test();
for (const level of ["debug", "log", "info", "warn", "error"]) {
  const written = console[level];
  console[level] = (...words) => {
    written.apply(console, words);
    globalThis[`on_console_${level}`]?.(words);
  };
}

// The exported name of a test is `__wbgt_` and some marks, then its path, of which the first part is the crate.
const nameOf = (exported) => exported.slice(exported.indexOf("::") + 2);

const runTests = async ({ filters, exact, includeIgnored }) => {
  const packed = atob(document.getElementById("wasm").textContent);
  const bytes = Uint8Array.from(packed, (letter) => letter.charCodeAt(0));
  const program = await wasm_bindgen({ module_or_path: bytes });
  for (const level of ["debug", "log", "info", "warn", "error"]) {
    globalThis[`on_console_${level}`] = wasm_bindgen[`__wbgtest_console_${level}`];
  }
  const wanted = (name) => !filters.length || filters.some((f) => (exact ? name === f : name.includes(f)));
  const all = Object.keys(program).filter((name) => name.startsWith("__wbgt_"));
  const chosen = all.filter((name) => wanted(nameOf(name)));
  const context = new wasm_bindgen.WasmBindgenTestContext(false);
  context.include_ignored(includeIgnored);
  context.filtered_count(all.length - chosen.length);
  return context.run(chosen.map((name) => program[name]));
};

runTests(JSON.parse(document.getElementById("choice").textContent)).then(
  (passed) => { globalThis.testsDone = { passed }; },
  (error) => { globalThis.testsDone = { passed: false, error: String(error && error.stack || error) }; },
);
