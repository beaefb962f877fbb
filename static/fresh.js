// Registers the service worker, tells the page of a new version, and takes it over when a person wants it.
//
// The page says what it wants by events of the window: `lampladder-started` (it has answered, so the files for use
// without a network may be fetched now), `lampladder-use-new`, `lampladder-kept` (something of the person's lies in the
// storage). It is told by `lampladder-new`, and by data-new of the document for whoever comes later.
"use strict";

const WORKERS = window.isSecureContext && navigator.serviceWorker;
const DAY = 24 * 60 * 60 * 1000;
const ASKED = `lampladder.persist ${new URL("./", location.href).pathname}`;

addEventListener("lampladder-kept", () => {
  // Once, whatever the answer was; where it is no, the browser may throw things away as it always did.
  try {
    if (!navigator.storage || !navigator.storage.persist || localStorage.getItem(ASKED)) return;
    localStorage.setItem(ASKED, "1");
    navigator.storage.persist().catch(() => {});
  } catch { /* Storage is forbidden: there is nothing to keep. */ }
});

function tell() {
  document.documentElement.dataset.new = "yes";
  dispatchEvent(new Event("lampladder-new"));
}

/** A worker that is installed while another one answers is a new version that waits. */
function watch(worker) {
  if (worker) worker.addEventListener("statechange", () => {
    if (worker.state === "installed" && WORKERS.controller) tell();
  });
}

if (WORKERS) {
  let wanted = false;
  let answered = WORKERS.controller !== null;
  addEventListener("lampladder-started", async () => {
    // A refusal changes nothing but that the page needs its server again.
    const found = await WORKERS.register("./sw.js", { updateViaCache: "none" }).catch(() => null);
    if (!found) return;
    if (found.waiting && WORKERS.controller) tell();
    watch(found.installing);
    found.addEventListener("updatefound", () => watch(found.installing));
    let looked = Date.now();
    document.addEventListener("visibilitychange", () => {
      if (document.visibilityState !== "visible" || Date.now() - looked < DAY) return;
      looked = Date.now();
      found.update().catch(() => {});
    });
  }, { once: true });
  addEventListener("lampladder-use-new", async () => {
    wanted = true;
    const found = await WORKERS.getRegistration();
    // Another window may have taken it over already.
    if (found && found.waiting) found.waiting.postMessage({ type: "take-over" });
    else location.reload();
  }, { once: true });
  WORKERS.addEventListener("controllerchange", () => {
    if (wanted) location.reload();
    // Another window has changed the version under this one; the very first worker is no change.
    else if (answered) tell();
    answered = true;
  });
}
