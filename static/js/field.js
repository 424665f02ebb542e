// The field of every hole choice: each instant centre as a point on the side view, filtered by windows, coloured and
// shaped by a figure. JSON in DEVELOPERS.md, "How pages are built". Drawn on a canvas: ten thousand marks at once.
import { SHAPES, Picture, stamp } from "./field_picture.js";

const STEPS = 1000; // a slider goes through the choices in order of the figure, so that far outliers take no room
const REACH = 22; // CSS pixels about a point

const element = (name, properties, ...children) => {
  const made = Object.assign(document.createElement(name), properties);
  made.append(...children);
  return made;
};

function say(value, figure) {
  if (!Number.isFinite(value)) return "none";
  const number = value.toLocaleString("en", { minimumFractionDigits: figure.decimals ?? 1, maximumFractionDigits: figure.decimals ?? 1 });
  return `${number.replace("-", "−")} ${figure.unit}`.trim();
}

class Field {
  constructor(place, data) {
    this.place = place;
    this.data = data;
    this.count = data.count;
    this.values = {};
    this.sorted = {};
    for (const [name, figure] of Object.entries(data.figures)) {
      this.values[name] = Float64Array.from(figure.values, (value) => (value === null ? NaN : value));
      this.sorted[name] = this.values[name].filter(Number.isFinite).sort();
    }
    this.windows = data.filters.map((filter) => ({ low: -Infinity, high: Infinity, ...(filter.figure ? filter : { figure: filter }) }));
    this.shown = new Uint8Array(this.count);
    this.chosen = data.current ?? -1;
    this.hovered = -1;
    this.build();
    this.picture = new Picture(this.canvas, data, this.values);
    this.classify(data.colour);
    new ResizeObserver(() => this.fit()).observe(this.canvas);
    document.addEventListener("themechange", () => {
      this.fit();
      this.classify(this.place.querySelector("select").value);
    });
  }

  build() {
    this.canvas = element("canvas", { className: "field-canvas", tabIndex: 0 });
    this.canvas.setAttribute("role", "img");
    this.told = element("p", { className: "told" });
    this.told.setAttribute("role", "status");
    this.tally = element("p", { className: "tally" });
    this.tally.setAttribute("role", "status");
    this.legend = element("ul", { className: "legend" });
    const pick = element("select", { onchange: () => this.classify(pick.value) });
    for (const [name, figure] of Object.entries(this.data.figures)) pick.append(element("option", { value: name, textContent: figure.label, selected: name === this.data.colour }));
    const controls = element("div", { className: "windows" }, element("label", {}, "Colour and shape by ", pick), this.legend, ...this.windows.map((window) => this.windowControl(window)), this.tally);
    this.place.replaceChildren(element("div", { className: "field-view" }, this.canvas, this.told), controls);
    this.canvas.addEventListener("pointermove", (event) => this.hover(this.nearest(event.offsetX, event.offsetY)));
    this.canvas.addEventListener("pointerleave", () => this.hover(-1));
    this.canvas.addEventListener("click", (event) => this.choose(this.nearest(event.offsetX, event.offsetY)));
    this.canvas.addEventListener("keydown", (event) => this.step(event));
  }

  windowControl(window) {
    const figure = this.data.figures[window.figure], sorted = this.sorted[window.figure];
    const at = (share) => sorted[Math.min(Math.round((share / STEPS) * (sorted.length - 1)), sorted.length - 1)];
    const group = element("fieldset", { className: "window" }, element("legend", { textContent: `${figure.label}${figure.unit ? ", " + figure.unit : ""}` }));
    for (const [end, words, home] of [["low", "from", 0], ["high", "to", STEPS]]) {
      const text = element("input", { type: "text", inputMode: "decimal", autocomplete: "off", ariaLabel: `${figure.label} ${words}` });
      const slider = element("input", { type: "range", min: 0, max: STEPS, value: home, ariaLabel: `${figure.label} ${words}` });
      const open = end === "low" ? -Infinity : Infinity;
      const rank = (value) => (value === open ? home : (sorted.findLastIndex((one) => one <= value) / Math.max(sorted.length - 1, 1)) * STEPS);
      const show = () => (text.value = window[end] === open ? "" : Number(window[end].toFixed((figure.decimals ?? 1) + 1)));
      slider.oninput = () => {
        window[end] = Number(slider.value) === home ? open : at(Number(slider.value));
        show();
        this.filter();
      };
      text.onchange = () => {
        const typed = Number(text.value.trim().replace("−", "-"));
        const sound = text.value.trim() === "" || Number.isFinite(typed);
        text.setAttribute("aria-invalid", String(!sound));
        if (!sound) return;
        window[end] = text.value.trim() === "" ? open : typed;
        slider.value = rank(window[end]);
        this.filter();
      };
      show();
      slider.value = rank(window[end]);
      group.append(element("label", {}, words + " ", text), slider);
    }
    return group;
  }

  // Five classes of equally many choices each, by the figure that colours.
  classify(name) {
    const figure = this.data.figures[name], sorted = this.sorted[name], values = this.values[name];
    const edge = (share) => sorted[Math.min(Math.floor(share * sorted.length), sorted.length - 1)];
    const edges = [0.2, 0.4, 0.6, 0.8].map(edge);
    this.classes = Uint8Array.from(values, (value) => (Number.isFinite(value) ? edges.reduce((sum, one) => sum + (value >= one ? 1 : 0), 0) : 255));
    const ends = [sorted[0], ...edges, sorted.at(-1)];
    this.legend.replaceChildren(...SHAPES.map((_, index) => element("li", {}, stamp(index, 6, 2), ` ${say(ends[index], figure)} to ${say(ends[index + 1], figure)}`)));
    this.filter();
  }

  fit() {
    if (this.picture.fit()) this.paint();
  }

  paint() {
    this.picture.paint(this.shown, this.classes);
    this.draw();
  }

  draw() {
    if (this.picture.picture) this.picture.draw(this.chosen, this.hovered);
  }

  filter() {
    const begun = performance.now();
    let left = 0;
    this.shown.fill(1);
    for (const { figure, low, high } of this.windows) {
      if (low === -Infinity && high === Infinity) continue;
      const values = this.values[figure];
      for (let n = 0; n < this.count; n++) if (!(values[n] >= low && values[n] <= high)) this.shown[n] = 0;
    }
    for (let n = 0; n < this.count; n++) left += this.shown[n];
    if (this.picture.picture || this.picture.fit()) this.paint();
    this.place.dataset.took = (performance.now() - begun).toFixed(1);
    const beyond = this.shown.reduce((sum, one, n) => sum + (one && !this.picture.inSight(n) ? 1 : 0), 0);
    const counted = (n) => n.toLocaleString("en");
    this.tally.textContent = left ? `${counted(left)} of ${counted(this.count)} choices${beyond ? `; ${counted(beyond)} of them beyond the drawing or with parallel links` : ""}` : "No choice is left within these windows: widen one of them.";
    this.canvas.setAttribute("aria-label", `Instant centres of ${counted(left)} hole choices over the side view`);
    this.place.dispatchEvent(new CustomEvent("fieldfilter", { bubbles: true, detail: { left, shown: this.shown } }));
  }

  nearest(x, y) {
    let found = -1, least = REACH * REACH;
    for (let n = 0; n < this.count; n++) {
      if (!this.shown[n]) continue;
      const away = (this.picture.px[n] - x) ** 2 + (this.picture.py[n] - y) ** 2;
      if (away < least) [found, least] = [n, away];
    }
    return found;
  }

  hover(n) {
    if (n === this.hovered) return;
    this.hovered = n;
    this.draw();
    this.tell(n < 0 ? this.chosen : n);
  }

  tell(n) {
    if (n < 0) return (this.told.textContent = "");
    const holes = Object.entries(this.data.holes).map(([place, numbers]) => `${this.data.bracket_labels[place]} ${numbers[n]}`);
    const figures = Object.entries(this.data.figures).map(([name, figure]) => `${figure.label} ${say(this.values[name][n], figure)}`);
    this.told.textContent = `Holes: ${holes.join(", ")}. ${figures.join(", ")}.`;
  }

  choose(n) {
    if (n < 0) return;
    this.chosen = n;
    this.draw();
    this.tell(n);
    const holes = Object.fromEntries(Object.entries(this.data.holes).map(([place, numbers]) => [place, numbers[n]]));
    for (const [place, number] of Object.entries(holes)) for (const input of document.querySelectorAll(`input[type="hidden"][name="${place}"]`)) input.value = number;
    this.place.dispatchEvent(new CustomEvent("choice", { bubbles: true, detail: { index: n, holes } }));
  }

  // By keyboard: from one choice to the next, in order of the figure that colours; Enter takes it.
  step(event) {
    const way = { ArrowRight: 1, ArrowDown: 1, ArrowLeft: -1, ArrowUp: -1 }[event.key];
    if (event.key === "Enter" || event.key === " ") this.choose(this.hovered);
    else if (!way) return;
    else {
      const values = this.values[this.place.querySelector("select").value];
      const order = Array.from(this.shown.keys()).filter((n) => this.shown[n]).sort((a, b) => values[a] - values[b]);
      const from = order.indexOf(this.hovered < 0 ? this.chosen : this.hovered);
      if (order.length) this.hover(order[Math.min(Math.max(from + way, 0), order.length - 1)]);
    }
    event.preventDefault();
  }
}

async function start(place) {
  const say = (words) => place.replaceChildren(element("p", { className: "empty", textContent: words }));
  say("Fetching every choice…");
  try {
    const answer = await fetch(place.dataset.src, { headers: { Accept: "application/json" }, credentials: "same-origin" });
    if (!answer.ok || answer.redirected) throw new Error(String(answer.status));
    const data = await answer.json();
    if (data.why_empty || !data.count) say(data.why_empty || "There are no choices to show.");
    else new Field(place, data);
  } catch (error) {
    say(`The choices could not be fetched (${error.message}). Load the page again; if it stays so, the server is not reached.`);
  }
}

const places = (root) => root.querySelectorAll(".field-plot[data-src]:not([data-begun])");
function startAll(root) {
  for (const place of places(root)) {
    place.dataset.begun = "yes";
    start(place);
  }
}
document.addEventListener("DOMContentLoaded", () => startAll(document));
document.addEventListener("htmx:load", (event) => startAll(event.detail.elt.parentNode || document));
