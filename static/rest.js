// The end of the page's own script, put there by `cargo xtask stamp`: fetches the rest of the program, which the first
// part calls through its table of functions, and its styles. `wasm` is wasm-bindgen's name for the first part.

const REST = new URL("rest.wasm", import.meta.url);
const STYLE = new URL("rest.css", import.meta.url);
const ROOT = document.documentElement;
let fetching;

function tell(state) {
  ROOT.dataset.rest = state;
  dispatchEvent(new Event("rest"));
}

/** Resolves when the styles apply, too. */
function fetchStyle() {
  const link = document.createElement("link");
  link.rel = "stylesheet";
  link.href = STYLE;
  return new Promise((resolve, reject) => {
    link.onload = resolve;
    link.onerror = () => {
      link.remove();
      reject(STYLE);
    };
    document.head.append(link);
  });
}

async function fetchProgram() {
  const answer = await fetch(REST);
  if (!answer.ok) throw answer.status;
  await WebAssembly.instantiate(await answer.arrayBuffer(), { f: wasm });
}

/** Fetches both, once; after a failure, once more. */
function fetchRest() {
  fetching ??= Promise.all([fetchProgram(), fetchStyle()]).then(() => tell("whole"), () => {
    fetching = undefined;
    tell("lost");
  });
}

/** Something of the rest is wanted before it has come: whoever wants it waits. */
function waitForRest() {
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
