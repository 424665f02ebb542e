// A hole chosen on the drawing is the same choice as in the form: the form is told, and htmx redraws.
(function () {
  function choose(hole) {
    const fields = document.getElementsByName(hole.dataset.bracket);
    for (const field of fields) {
      if (field.type === "radio") {
        if (field.value !== hole.dataset.hole) continue;
        field.checked = true;
      } else {
        field.value = hole.dataset.hole;
      }
      field.dispatchEvent(new Event("change", { bubbles: true }));
      field.dispatchEvent(new Event("input", { bubbles: true }));
      return;
    }
  }
  let again = null;
  document.addEventListener("click", function (event) {
    const hole = event.target.closest(".pick");
    if (hole) choose(hole);
  });
  document.addEventListener("keydown", function (event) {
    const hole = event.target.closest && event.target.closest(".pick");
    if (!hole || (event.key !== "Enter" && event.key !== " ")) return;
    event.preventDefault();
    again = [hole.dataset.bracket, hole.dataset.hole];
    choose(hole);
  });
  // The drawing is swapped for a new one; whoever walks it by keyboard stays on the hole just chosen.
  document.addEventListener("htmx:afterSwap", function () {
    if (!again) return;
    const hole = document.querySelector('.pick[data-bracket="' + again[0] + '"][data-hole="' + again[1] + '"]');
    if (hole) hole.focus();
    again = null;
  });
})();
