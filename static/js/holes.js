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
  // Holes stand an inch apart, closer than fingers are: whatever is touched, the nearest hole within reach is meant.
  const REACH = 30; // CSS pixels about a hole
  function nearest(drawing, x, y) {
    let found = null, least = REACH;
    for (const hole of drawing.querySelectorAll(".pick")) {
      const box = hole.querySelector(".hole").getBoundingClientRect();
      const away = Math.hypot(x - box.x - box.width / 2, y - box.y - box.height / 2);
      if (away < least) [found, least] = [hole, away];
    }
    return found;
  }
  document.addEventListener("click", function (event) {
    const drawing = event.target.closest("svg.side-view");
    const hole = drawing && nearest(drawing, event.clientX, event.clientY);
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
