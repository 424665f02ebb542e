// Beside the field of hole choices: the one that was touched is fetched, those that are left can be launched.
const place = document.getElementById("field");
const form = document.getElementById("launch-left");

place.addEventListener("choice", (event) => {
  htmx.ajax("GET", place.dataset.choice.replace(/0$/, event.detail.index), { target: "#chosen", swap: "innerHTML" });
});

place.addEventListener("fieldfilter", (event) => {
  if (!form) return;
  const { left, shown } = event.detail;
  const button = form.querySelector("button");
  button.disabled = left === 0;
  button.textContent = left ? `Launch these ${left.toLocaleString("en")}` : "No choice is left to launch";
  form.dataset.left = left;
  form.shown = shown;
});

// Written out once, when it is sent: ten thousand numbers are not for each step of a slider.
form?.addEventListener("submit", () => {
  form.elements.left.value = Array.from(form.shown.keys()).filter((n) => form.shown[n]).join(",");
});
