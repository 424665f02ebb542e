// Light or dark before the first paint: the person's own choice, else the system's.
(function () {
  const kept = localStorage.getItem("theme");
  if (kept) document.documentElement.dataset.theme = kept;
  document.addEventListener("click", function (event) {
    if (!event.target.closest("#theme")) return;
    const dark = document.documentElement.dataset.theme
      ? document.documentElement.dataset.theme === "dark"
      : matchMedia("(prefers-color-scheme: dark)").matches;
    const next = dark ? "light" : "dark";
    document.documentElement.dataset.theme = next;
    localStorage.setItem("theme", next);
    document.dispatchEvent(new CustomEvent("themechange"));
  });
})();
