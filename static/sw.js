// Lampladder's service worker: keeps exactly the files of one build, so that the page works without a network.
//
// The two lines below are filled in after each build (cargo xtask stamp). A new build has another VERSION; its
// worker loads all its files beside the old ones and then waits: the page in front of a person stays as it is until
// it asks for the change with postMessage({type: "take-over"}) or is closed.
"use strict";

const VERSION = "unstamped";
const FILES = [];

const SCOPE = self.registration.scope;
// Caches belong to a whole host, which may serve other pages (and other copies of this one): only names that begin
// with our own path are ours to remove.
const OURS = `lampladder ${SCOPE} `;
const CACHE = OURS + VERSION;
const ADDRESSES = new Set(FILES.map((file) => new URL(file, SCOPE).href));
const HOME = new URL("./", SCOPE).href;

self.addEventListener("install", (event) => {
  event.waitUntil(keepAll());
});

self.addEventListener("activate", (event) => {
  event.waitUntil(removeOld().then(() => self.clients.claim()));
});

self.addEventListener("message", (event) => {
  if (event.data && event.data.type === "take-over") self.skipWaiting();
});

self.addEventListener("fetch", (event) => {
  const request = event.request;
  if (request.method !== "GET" || !request.url.startsWith(SCOPE)) return;
  const address = withoutQuery(request.url);
  if (ADDRESSES.has(address)) {
    event.respondWith(answer(address, request));
  } else if (request.mode === "navigate") {
    event.respondWith(answer(HOME, request));
  }
});

/** All or nothing: one file that cannot be had fails the installation, and the old build goes on. */
async function keepAll() {
  const cache = await caches.open(CACHE);
  await Promise.all([...ADDRESSES].map(async (address) => {
    // A name with a hash in it never changes its contents, so the browser's own copy will do: the page has just
    // loaded it. All else is asked for afresh, or an old page could be kept under a new version.
    const hashed = /-[0-9a-f]{12,16}[._]/.test(address);
    const response = await fetch(address, { cache: hashed ? "default" : "reload", credentials: "same-origin" });
    if (!response.ok) throw new Error(`${address} answered ${response.status}`);
    await cache.put(address, await plain(response));
  }));
}

/** A browser refuses a redirected answer for a navigation; its contents are as good. */
async function plain(response) {
  if (!response.redirected) return response;
  return new Response(await response.blob(), { status: response.status, headers: response.headers });
}

async function removeOld() {
  const names = await caches.keys();
  await Promise.all(names.filter((name) => name.startsWith(OURS) && name !== CACHE).map((name) => caches.delete(name)));
}

/** The kept file; the network only where the browser has thrown it away. */
async function answer(address, request) {
  const cache = await caches.open(CACHE);
  return (await cache.match(address, { ignoreVary: true })) || fetch(request);
}

function withoutQuery(url) {
  const address = new URL(url);
  address.search = "";
  address.hash = "";
  return address.href;
}
