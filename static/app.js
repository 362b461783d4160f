// What the pages need beyond htmx and plain forms. All of them work without
// this file; it only makes them quicker.
"use strict";

// The alarm is up from the first request that got no proper answer until the
// next one that did.
const alarm = (up) => {
  const element = document.getElementById("offline");
  if (element) element.hidden = !up;
};
document.addEventListener("htmx:error", () => alarm(true));
document.addEventListener("htmx:response:error", (event) => {
  if (event.detail.ctx.response.status >= 500) alarm(true);
});
document.addEventListener("htmx:after:swap", () => alarm(false));
