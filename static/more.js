// The further sections of a build's page: each is fetched when it is opened,
// and again when the build has a new revision while it stands open.
"use strict";

(() => {
  const form = document.getElementById("build");
  const folds = [...document.querySelectorAll("details.more")];
  const load = (fold) => {
    const revision = document.getElementById("revision").value;
    if (!fold.open || fold.dataset.shown === revision) return;
    fold.dataset.shown = revision;
    htmx.trigger(fold, "more");
  };
  for (const fold of folds) {
    fold.addEventListener("toggle", () => load(fold));
    fold.addEventListener("htmx:finally:request", (event) => {
      const response = event.detail.ctx.response;
      if (!response || response.status >= 400) delete fold.dataset.shown; // opening it again asks again
    });
  }
  if (form) form.addEventListener("htmx:finally:request", () => folds.forEach(load));
})();
