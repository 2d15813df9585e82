// Aftercount {{version}} as one script for other pages: `await aftercount.ready`, then `aftercount.outcome(text)`.
/*
{{licences}}
*/
var aftercount = (function () {
  "use strict";
  const packed = "{{wasm}}";
  const first = "{{unpacker}}"; // unpacks the rest; in hexadecimal digits
  let compiled;
  let engine; // nothing until it is ready, and after it could not be started

  // The glue keeps the engine's state in itself: called once more, it makes an engine that knows nothing of the last.
  function glue() {
    {{glue}}
    return wasm_bindgen;
  }

  function start() {
    engine = glue();
    engine.initSync({ module: compiled });
  }

  function problem(words) {
    return { ok: false, problems: [{ key: null, item: null, found: null, problem: words }] };
  }

  function outcome(text) {
    if (!engine) return problem("Aftercount is not ready: await aftercount.ready first");
    try {
      return engine.outcome(text);
    } catch (error) {
      // An engine that stopped cannot be trusted with another call.
      start();
      return problem("Aftercount stopped on this text: " + error);
    }
  }

  async function unpack() {
    await null; // while this script runs, the glue would ask for its address, which it may not have
    {{unpacker-glue}}
    const program = Uint8Array.from(first.match(/../g), (pair) => parseInt(pair, 16));
    unpacker.initSync({ module: await WebAssembly.compile(program) });
    const bytes = Uint8Array.from(atob(packed), (letter) => letter.charCodeAt(0));
    compiled = await WebAssembly.compile(unpacker.unpack(bytes));
    start();
  }

  return Object.freeze({ ready: unpack(), outcome, version: "{{version}}" });
})();
