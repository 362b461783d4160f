// The build page's form: it is sent a moment after the last key, in order, one
// post at a time, and again when the program was away. The fields themselves
// are never written to from here but by buttons that are there to do so.
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

  const kept = () => document.getElementById("kept");
  const say = (words) => {
    const line = kept();
    if (line) line.textContent = words;
  };
  const save = () => {
    clearTimeout(timer);
    if (underWay) return; // sent when that one is answered
    htmx.trigger(form, "save");
  };
  const later = (wait) => {
    clearTimeout(timer);
    timer = setTimeout(save, wait);
  };

  form.addEventListener("input", (event) => {
    if (!event.target.name) return;
    typed += 1;
    say("keeping …");
    if (event.target.hasAttribute("data-rebuilds")) {
      freeze(true);
      save();
    } else {
      later(pause);
    }
  });

  // While an answer may change which fields there are, nothing can be typed
  // into those that may go.
  const freeze = (on) => {
    const editor = document.getElementById("editor");
    if (editor) editor.inert = on;
  };
  form.addEventListener("submit", (event) => {
    clearTimeout(timer);
    const button = event.submitter;
    if (button && (button.hasAttribute("data-rebuilds") || button.name === "do")) freeze(true);
  });

  form.addEventListener("htmx:before:request", (event) => {
    const body = event.detail.ctx.request.body;
    const revision = document.getElementById("revision");
    // The post may have waited for the one before it, which made a revision.
    if (body && revision) body.set("revision", revision.value);
    underWay += 1;
    sent = typed;
  });
  form.addEventListener("htmx:finally:request", (event) => {
    underWay = Math.max(0, underWay - 1);
    const response = event.detail.ctx.response;
    freeze(false);
    if (!response || response.status >= 500) {
      sent = -1;
      say("not kept: no answer");
      later(retry);
      return;
    }
    if (typed > sent) {
      say("keeping …");
      later(pause);
    }
    markFaults();
  });

  // What is wrong stands in a line that the input names; the input itself is
  // told here, because no answer touches it.
  const markFaults = () => {
    for (const line of form.querySelectorAll(".error")) {
      const wrong = line.textContent.trim() !== "";
      for (const input of form.querySelectorAll(`[aria-describedby~="${line.id}"]`)) {
        input.setAttribute("aria-invalid", String(wrong));
      }
    }
  };

  // Leaving with something not yet sent: it goes along in the background.
  addEventListener("pagehide", () => {
    if (typed > sent) {
      clearTimeout(timer);
      sent = typed;
      navigator.sendBeacon(form.action, new URLSearchParams(new FormData(form)));
    }
  });

  // Which string's fields stand open goes with every post.
  form.addEventListener("toggle", (event) => {
    const string = event.target.dataset.string;
    const open = document.getElementById("open");
    if (string !== undefined && event.target.open && open) open.value = string;
  }, true);

  form.addEventListener("click", (event) => {
    const step = event.target.closest("[data-step]");
    if (step) {
      const input = document.getElementById(step.dataset.steps);
      const number = Number.parseInt(input.value, 10);
      if (Number.isFinite(number)) {
        event.preventDefault();
        fill(input, String(Math.max(1, number + Number(step.dataset.step))));
      }
      return;
    }
    const link = event.target.closest('a[href^="#"]');
    if (link) {
      const target = document.getElementById(link.getAttribute("href").slice(1));
      if (!target || !target.closest("#editor")) return;
      event.preventDefault();
      const fold = target.closest("details");
      if (fold) fold.open = true;
      const field = target.matches("input, select, textarea") ? target : target.querySelector("summary");
      field.focus();
      field.scrollIntoView({ block: "nearest" });
      if (field.select) field.select();
    }
  });

  // Buttons that put a value into a field, and send it as if it were typed.
  const fill = (input, value) => {
    input.value = value;
    input.dispatchEvent(new Event("input", { bubbles: true }));
  };
  form.addEventListener("click", (event) => {
    const offer = event.target.closest("[data-sets]");
    if (!offer) return;
    event.preventDefault();
    fill(document.getElementById(offer.dataset.sets), offer.dataset.value);
  });

  // Undo and redo by keys, outside fields: inside, the browser's own undo rules.
  document.addEventListener("keydown", (event) => {
    if (!(event.ctrlKey || event.metaKey) || event.altKey || event.key.toLowerCase() !== "z") return;
    if (event.target.closest("input, textarea, select")) return;
    const button = document.getElementById(event.shiftKey ? "redo" : "undo");
    if (!button || button.disabled) return;
    event.preventDefault();
    form.requestSubmit(button);
  });
})();
