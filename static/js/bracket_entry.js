// A bracket is measured one way or the other: only the fields of the way chosen are in sight. What was typed in the others
// stays, so that changing one's mind loses nothing; without this script both are there.
"use strict";

for (const bracket of document.querySelectorAll("fieldset.bracket")) {
  const show = () => {
    const chosen = bracket.querySelector('input[name$="_entry"]:checked');
    for (const part of bracket.querySelectorAll("[data-entry]")) {
      part.hidden = Boolean(chosen) && part.dataset.entry !== chosen.value;
    }
  };
  bracket.addEventListener("change", show);
  // js/live.js may put back what was typed before an expired sign-in.
  window.addEventListener("load", show);
  show();
}
