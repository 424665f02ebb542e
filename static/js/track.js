// The track's clock is the phone's: slips and stations print local time, which no server knows.
(function () {
  const two = (number) => String(number).padStart(2, "0");

  document.addEventListener("submit", function (event) {
    const now = new Date();
    for (const field of event.target.querySelectorAll("[data-now]")) {
      field.value = field.dataset.now === "day"
        ? `${now.getFullYear()}-${two(now.getMonth() + 1)}-${two(now.getDate())}`
        : `${two(now.getHours())}:${two(now.getMinutes())}`;
    }
  });
  document.addEventListener("click", function (event) {
    if (event.target.closest("[data-print]")) print();
  });
})();
