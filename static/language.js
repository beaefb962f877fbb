// Which language: a person's choice, else the browser's languages in their order, else English. Runs before anything is
// drawn. The cautions stand in the page in every language, and style sheets show those of the document's language; the
// program fetches its texts by the document's language and hears of a change by the event "reword".
"use strict";
(() => {
  // Storage belongs to a whole host: the name has the page's folder in it, as all names have.
  const KEY = `lampladder.language ${location.pathname.replace(/[^/]*$/, "")}`;
  const root = document.documentElement;
  const words = (tag) => document.querySelector(`meta[name="words-${CSS.escape(tag)}"]`);
  const spoken = (tag) => {
    const short = String(tag).toLowerCase().split("-")[0];
    return words(short) ? short : undefined;
  };
  // Storage may be forbidden.
  const kept = () => {
    try { return localStorage.getItem(KEY); } catch { return null; }
  };
  const mark = () => {
    for (const link of document.querySelectorAll("a[data-language]")) {
      if (link.dataset.language === root.lang) link.setAttribute("aria-current", "true");
      else link.removeAttribute("aria-current");
    }
  };
  const choose = (tag) => {
    root.lang = tag;
    mark();
    try { localStorage.setItem(KEY, tag); } catch { /* It lasts until the page is closed. */ }
    dispatchEvent(new Event("reword"));
  };
  root.lang = [kept(), ...navigator.languages].map(spoken).find(Boolean) || "en";
  // The texts are on their way before the program asks for them.
  const early = document.createElement("link");
  early.rel = "preload";
  early.as = "fetch";
  early.crossOrigin = "anonymous";
  early.href = words(root.lang)?.content ?? "";
  if (early.href) document.head.append(early);
  document.addEventListener("DOMContentLoaded", mark);
  document.addEventListener("click", (event) => {
    const link = event.target.closest?.("a[data-language]");
    if (!link) return;
    event.preventDefault();
    choose(link.dataset.language);
  });
  document.addEventListener("change", (event) => {
    if (event.target.matches?.("select[data-testid=language]")) choose(event.target.value);
  });
})();
