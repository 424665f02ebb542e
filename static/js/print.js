// The button that prints a sheet; without script the browser's own menu does.
document.addEventListener("DOMContentLoaded", function () {
  for (const button of document.querySelectorAll("[data-print]")) {
    button.hidden = false;
    button.addEventListener("click", () => window.print());
  }
});
