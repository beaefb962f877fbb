// The end of the page's own script, put there by `cargo xtask stamp`: fetches the rest of the program, which the first
// part calls through its table of functions. `wasm` is wasm-bindgen's name for the first part.

const REST = new URL("rest.wasm", import.meta.url);
const ROOT = document.documentElement;
let fetching;

function tell(state) {
  ROOT.dataset.rest = state;
  dispatchEvent(new Event("rest"));
}

/** Fetches it, once; after a failure, once more. */
function fetchRest() {
  fetching ??= fetch(REST)
    .then((answer) => answer.ok ? answer.arrayBuffer() : Promise.reject(answer.status))
    .then((bytes) => WebAssembly.instantiate(bytes, { f: wasm }))
    .then(() => tell("whole"), () => {
      fetching = undefined;
      tell("lost");
    });
}

/** Something of the rest is wanted before it has come: whoever wants it waits. */
function waitForRest() {
  if (ROOT.dataset.rest === "whole") return;
  const request = new XMLHttpRequest();
  request.open("GET", REST, false);
  // The only way to bytes without a promise.
  request.overrideMimeType("text/plain; charset=x-user-defined");
  request.send();
  const bytes = Uint8Array.from(request.responseText, (character) => character.charCodeAt(0) & 255);
  new WebAssembly.Instance(new WebAssembly.Module(bytes), { f: wasm });
  ROOT.dataset.restWaits = 1 + Number(ROOT.dataset.restWaits ?? 0);
}

ROOT.dataset.rest = "coming";
addEventListener("rest-again", fetchRest);
addEventListener("TrunkApplicationStarted", () => setTimeout(fetchRest));
