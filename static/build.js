// The build page's form: it is sent a moment after the last key, one post at a
// time, and again when the program was away. The fields are never written to
// from here but by buttons that are there to do so.
"use strict";

(() => {
  const form = document.getElementById("build");
  if (!form) return;
  document.documentElement.classList.add("live");

  const pause = 200; // ms without a key before the form is sent
  const retry = 2000; // ms until it is sent again when no answer came
  let timer = 0;
  let typed = 0; // counts edits
  let sent = 0; // the count when the last post left
  let underWay = 0; // posts without an answer yet
  let rebuilding = 0; // of those and the ones to come, how many may change which fields there are
  let rebuild = false; // the next post is such a one, by an edit
  let after = null; // what to do when everything is kept

  const say = (words) => {
    const line = document.getElementById("kept");
    if (line) line.textContent = words;
  };
  const save = () => {
    clearTimeout(timer);
    if (!underWay) htmx.trigger(form, "save"); // else it is sent when that one is answered
  };
  const later = (wait) => {
    clearTimeout(timer);
    timer = setTimeout(save, wait);
  };

  // While an answer may change which fields there are, nothing can be typed
  // into those that may go. The focus comes back to where it was.
  let focus = null;
  const freeze = () => {
    const editor = document.getElementById("editor");
    if (!editor) return;
    if (rebuilding && !editor.inert) focus = { id: document.activeElement.id, value: document.activeElement.value };
    editor.inert = rebuilding > 0;
  };
  const refocus = () => {
    if (!focus || document.activeElement !== document.body) return;
    const open = document.getElementById("open");
    const places = [
      focus.id && document.getElementById(focus.id),
      focus.value?.startsWith("stack-add") && [...form.querySelectorAll("details[open] .stack-row select")].pop(),
      [...form.querySelectorAll("button[name=do]:enabled")].find((b) => b.value === focus.value),
      open && document.querySelector(`#string-${open.value} > summary`),
    ];
    const place = focus.value?.startsWith("string-") ? places[3] : places.find((p) => p && !p.disabled);
    if (place) place.focus({ preventScroll: true });
    focus = null;
  };

  form.addEventListener("input", (event) => {
    if (!event.target.name) return;
    typed += 1;
    say("keeping …");
    if (!event.target.hasAttribute("data-rebuilds")) {
      later(pause);
      return;
    }
    if (!rebuild) rebuilding += 1;
    rebuild = true;
    freeze();
    save();
  });

  const rebuilds = (button) => button && (button.hasAttribute("data-rebuilds") || button.name === "do");
  form.addEventListener("submit", (event) => {
    clearTimeout(timer);
    if (!rebuilds(event.submitter)) return;
    rebuilding += 1;
    freeze();
  });

  form.addEventListener("htmx:before:request", (event) => {
    const ctx = event.detail.ctx;
    const revision = document.getElementById("revision");
    // The post may have waited for the one before it, which made a revision.
    if (ctx.request.body && revision) ctx.request.body.set("revision", revision.value);
    ctx.rebuilds = (rebuild ? 1 : 0) + (rebuilds(ctx.request.submitter) ? 1 : 0);
    rebuild = false;
    underWay += 1;
    sent = typed;
  });
  form.addEventListener("htmx:finally:request", (event) => {
    const ctx = event.detail.ctx;
    underWay -= 1;
    rebuilding -= ctx.rebuilds;
    freeze();
    if (!ctx.response || ctx.response.status >= 500) {
      sent = -1;
      say("not kept: no answer");
      later(retry);
      return;
    }
    markFaults();
    if (!rebuilding) refocus();
    if (typed > sent) {
      say("keeping …");
      later(rebuild ? 0 : pause);
    } else if (after) {
      after();
      after = null;
    }
  });

  // What is wrong stands in a line that the input names; the input itself is
  // told here, because no answer touches it.
  const markFaults = () => {
    for (const line of form.querySelectorAll(".error")) {
      const wrong = String(line.textContent.trim() !== "");
      for (const input of form.querySelectorAll(`[aria-describedby~="${line.id}"]`)) {
        if (input.getAttribute("aria-invalid") !== wrong) input.setAttribute("aria-invalid", wrong);
      }
    }
  };

  // Leaving with something not yet sent: it goes along in the background.
  addEventListener("pagehide", () => {
    if (typed <= sent) return;
    clearTimeout(timer);
    sent = typed;
    navigator.sendBeacon(form.action, new URLSearchParams(new FormData(form)));
  });
  // A copy is made of what was typed, so that is kept first.
  for (const other of document.querySelectorAll("#copy-build, #delete-build")) {
    other.addEventListener("submit", (event) => {
      if (typed <= sent && !underWay) return;
      event.preventDefault();
      after = () => other.submit();
      save();
    });
  }

  // Which string's fields stand open goes with every post.
  form.addEventListener("toggle", (event) => {
    const string = event.target.dataset.string;
    const open = document.getElementById("open");
    if (string !== undefined && event.target.open && open) open.value = string;
  }, true);

  // Buttons that put a value into a field send it as if it were typed.
  const fill = (input, value) => {
    input.value = value;
    input.dispatchEvent(new Event("input", { bubbles: true }));
  };
  const step = (button) => {
    const input = document.getElementById(button.dataset.steps);
    const number = Number.parseInt(input.value, 10);
    if (Number.isFinite(number)) fill(input, String(Math.max(1, number + Number(button.dataset.step))));
  };
  // A link to a field opens what the field is folded away in.
  const follow = (link, event) => {
    const target = document.getElementById(link.getAttribute("href").slice(1));
    if (!target || !target.closest("#editor")) return;
    event.preventDefault();
    const fold = target.closest("details");
    if (fold) fold.open = true;
    const field = target.matches("input, select, textarea") ? target : target.querySelector("summary");
    field.focus();
    field.scrollIntoView({ block: "nearest" });
    if (field.select) field.select();
  };
  form.addEventListener("click", (event) => {
    const stepper = event.target.closest("[data-step]");
    const offer = event.target.closest("[data-sets]");
    const link = event.target.closest('a[href^="#"]');
    if (stepper || offer) event.preventDefault();
    if (stepper) step(stepper);
    if (offer) fill(document.getElementById(offer.dataset.sets), offer.dataset.value);
    if (link) follow(link, event);
  });

  // Undo and redo by keys, outside fields: inside, the browser's own undo rules.
  addEventListener("keydown", (event) => {
    if (!(event.ctrlKey || event.metaKey) || event.altKey || event.key.toLowerCase() !== "z") return;
    if (event.target.closest?.("input, textarea, select")) return;
    const button = document.getElementById(event.shiftKey ? "redo" : "undo");
    if (!button || button.disabled) return;
    event.preventDefault();
    form.requestSubmit(button);
  });
})();
