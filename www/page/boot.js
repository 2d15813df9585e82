// Starts the page's program, and starts it once more where it traps. Everything else is Rust.
(function () {
  "use strict";
  const glue = document.getElementById("glue").textContent;
  let compiled;
  let life; // ends the listeners of the instance that runs
  let traps = 0;

  // atob and a loop: the newer ways to decode are not in every browser that runs the program.
  function decode(text) {
    const letters = atob(text.trim());
    const bytes = new Uint8Array(letters.length);
    for (let i = 0; i < letters.length; i += 1) bytes[i] = letters.charCodeAt(i);
    return bytes;
  }

  function fromHex(text) {
    return Uint8Array.from(text.match(/../g), (pair) => parseInt(pair, 16));
  }

  // An instance of its own: the glue keeps its state in itself, so its text has to run again. The policy knows the text.
  function freshGlue() {
    if (traps === 0) return; // the page's own element has just run
    const script = document.createElement("script");
    script.textContent = glue;
    document.head.append(script);
    script.remove();
  }

  function start(text) {
    life = new AbortController();
    try {
      freshGlue();
      window.wasm_bindgen = wasm_bindgen;
      wasm_bindgen.initSync({ module: compiled });
      wasm_bindgen.start(life.signal, text);
    } catch (error) {
      recover(error);
    }
  }

  // A program that trapped cannot be trusted with another call: keep the text, drop the rest.
  function recover(error) {
    traps += 1;
    life.abort();
    console.error(error);
    if (traps > 1) give(window.aftercountText || location.hash.slice(1));
    else start(window.aftercountText);
  }

  function give(text) {
    delete document.documentElement.dataset.settled;
    document.documentElement.dataset.state = "stale";
    const notice = document.getElementById("stopped");
    notice.querySelector("textarea").value = text;
    notice.hidden = false;
    for (const dialog of document.querySelectorAll("dialog[open]")) dialog.close(); // it would hide the notice
    document.getElementById("engagement").inert = true; // nobody would keep what is typed there
    notice.scrollIntoView();
  }

  function look(error) {
    if (window.WebAssembly && error instanceof WebAssembly.RuntimeError && traps < 2) recover(error);
  }
  window.addEventListener("error", (event) => look(event.error));
  window.addEventListener("unhandledrejection", (event) => look(event.reason));

  Promise.resolve()
    .then(() => WebAssembly.compile(fromHex(document.getElementById("unpacker").textContent)))
    .then((module) => unpacker.initSync({ module }))
    .then(() => WebAssembly.compile(unpacker.unpack(decode(document.getElementById("wasm").textContent))))
    .then((module) => { compiled = module; start(undefined); })
    .catch((error) => {
      document.getElementById("no-engine").hidden = false;
      console.error(error);
    });
})();
