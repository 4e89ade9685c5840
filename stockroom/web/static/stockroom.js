// A little help where a browser can give it; every page works without.
"use strict";

const KEYS = {
  w: "/week", t: "/term", d: "/day", s: "/shelf", r: "/recipe", b: "/buying",
  u: "/use", y: "/try", e: "/enter", h: "/rules", i: "/bring-in",
};
const OFF = "stockroom-keys-off";
const WAIT = 150; // ms without a key before names are asked for
const QUICK = 80; // ms between the keys of a scanner; hardly a hand is so fast
const SIGNS = 4; // a scanner sends at least so many, Enter among them: our choice
const AGAIN = 4000; // ms until a button may be pressed again where the page stayed

// -- names while somebody types ------------------------------------------------------------

function offerNames(input) {
  const list = document.getElementById(input.getAttribute("list"));
  let waiting = 0;
  let asking = null;
  let shown = "";
  if (!list) return;
  input.addEventListener("input", () => {
    clearTimeout(waiting);
    if (asking) asking.abort();
    const typed = input.value.trim();
    // a name that was chosen from the list needs no other offered
    if (typed.length < 2 || typed.length > 100 || typed === shown || chosen(list, typed)) return;
    waiting = setTimeout(async () => {
      asking = new AbortController();
      const asked = new URLSearchParams({ kind: input.dataset.names, of: typed });
      try {
        const answer = await fetch(`/names?${asked}`, { signal: asking.signal });
        if (answer.ok) fill(list, await answer.json());
        shown = typed;
      } catch {
        // overtaken by the next key, or the house is shut: what is typed counts all the same
      }
    }, WAIT);
  });
}

function chosen(list, typed) {
  return [...list.options].some((option) => option.value === typed);
}

function fill(list, names) {
  list.replaceChildren(...names.map((name) => {
    const option = document.createElement("option");
    option.value = name.value;
    option.label = name.words;
    return option;
  }));
}

// -- a form is sent once -------------------------------------------------------------------

function sendOnce(form) {
  form.addEventListener("submit", (event) => {
    if (form.dataset.sent) {
      event.preventDefault();
      return;
    }
    form.dataset.sent = "yes";
    // only after the browser has taken the values: a disabled button sends none
    setTimeout(() => press(form, true), 0);
    setTimeout(() => press(form, false), AGAIN);
  });
}

function press(form, sent) {
  for (const button of form.querySelectorAll("button")) button.disabled = sent;
  if (!sent) delete form.dataset.sent;
}

// -- keys, and a scanner -------------------------------------------------------------------

const line = document.getElementById("line");
let first = ""; // "g", waiting for the second key
let scanned = "";
let last = 0;

function keysAreOff() {
  try {
    return localStorage.getItem(OFF) === "yes";
  } catch {
    return false; // nothing may be kept here
  }
}

function isTyping(target) {
  return target.isContentEditable || /^(INPUT|TEXTAREA|SELECT)$/.test(target.tagName);
}

function scan(event) {
  const quick = event.timeStamp - last < QUICK;
  last = event.timeStamp;
  if (event.key === "Enter" && quick && scanned.length + 1 >= SIGNS) {
    event.preventDefault();
    // with room for an amount behind it; Enter alone goes to the bottle
    line.value = `${scanned} `;
    line.focus();
  }
  if (event.key.length !== 1) {
    if (event.key !== "Shift") scanned = "";
    return false;
  }
  scanned = quick ? scanned + event.key : event.key;
  // two keys of a quick hand are a way to a page; the third of a run is a scanner's
  return scanned.length >= SIGNS - 1;
}

function onKey(event) {
  if (event.ctrlKey || event.altKey || event.metaKey || isTyping(event.target)) return;
  const running = line && scan(event);
  if (running || keysAreOff() || event.key === "Shift") {
    first = event.key === "Shift" ? first : "";
    return;
  }
  const page = first === "g" ? KEYS[event.key] : undefined;
  first = event.key === "g" ? "g" : "";
  if (page) location.assign(page);
  else if (event.key === "?") location.assign("/enter#keys");
  else if (event.key === "/" && line) {
    event.preventDefault();
    line.focus();
  }
}

function offerSwitch(box) {
  box.checked = !keysAreOff();
  box.closest("[hidden]").hidden = false;
  box.addEventListener("change", () => {
    try {
      localStorage.setItem(OFF, box.checked ? "no" : "yes");
    } catch {
      box.checked = true;
    }
  });
}

// -- when the page has come ----------------------------------------------------------------

document.addEventListener("keydown", onKey);
for (const input of document.querySelectorAll("input[data-names]")) offerNames(input);
for (const form of document.querySelectorAll("form[method=post]")) sendOnce(form);
const keys = document.getElementById("use-keys");
if (keys) offerSwitch(keys);
const wrong = document.querySelector("main [aria-invalid=true]");
if (wrong) wrong.focus();
// back from another page: each form was drawn for one event, so all are drawn anew
addEventListener("pageshow", (event) => {
  if (event.persisted) location.reload();
});
