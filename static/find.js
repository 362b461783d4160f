// Finding without a mouse: "/" goes to the search field of any page; on the
// shelf and in the drawer arrows go from one card or row to the next. Tab
// reaches them all without this file.
"use strict";

const stops = () => [...document.querySelectorAll("a.open")];

// typing tells whether a key belongs to what somebody is writing.
const typing = (element) => element.matches("input, textarea, select, [contenteditable]");

// Where a stop lies: its card or row.
const place = (stop) => (stop.closest(".card, tr") || stop).getBoundingClientRect();

// beside returns the stop on the next line up or down that is nearest sideways.
const beside = (from, all, down) => {
  const here = place(from);
  const apart = (r) => (down ? r.top - here.top : here.top - r.top);
  let best = null;
  for (const stop of all) {
    const r = place(stop);
    if (apart(r) < 5) continue;
    const far = apart(r) * 1000 + Math.abs(r.left - here.left);
    if (best === null || far < best.far) best = { stop, far };
  }
  return best && best.stop;
};

document.addEventListener("keydown", (event) => {
  if (event.defaultPrevented || event.ctrlKey || event.metaKey || event.altKey) return;
  const find = document.getElementById("find") || document.getElementById("find-build");
  const at = event.target;
  if (event.key === "/" && find && !typing(at)) {
    event.preventDefault();
    find.focus();
    find.select();
    return;
  }
  const all = stops();
  let to = null;
  if (at === find && event.key === "ArrowDown") {
    to = all[0];
  } else if (at.matches && at.matches("a.open")) {
    const i = all.indexOf(at);
    if (event.key === "ArrowRight") to = all[i + 1];
    if (event.key === "ArrowLeft") to = all[i - 1];
    if (event.key === "ArrowDown") to = beside(at, all, true);
    if (event.key === "ArrowUp") to = beside(at, all, false) || find;
  }
  if (!to) return;
  event.preventDefault();
  to.focus();
});
