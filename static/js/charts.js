// Charts of a launch from a JSON endpoint (DEVELOPERS.md, "How pages are built"): one time axis, one zoom and one cursor
// for all charts of a page; reference lines, event marks, a second run overlaid with the difference below.
(function () {
  const DASHES = ["solid", "dash", "dashdot", "longdash"];
  const PAPER = { ink: "#000", faint: "#444", hair: "#ddd", sheet: "#fff", series: ["#0072b2", "#d55e00", "#009e73", "#a5527f"] };
  const charts = []; // every drawn chart of this page: {place, plot, data, names, span}
  let passing = false; // one chart tells the others; they must not tell it back

  function colours() {
    const style = getComputedStyle(document.documentElement);
    const of = (name) => style.getPropertyValue(name).trim();
    return { ink: of("--ink"), faint: of("--faint"), hair: of("--hair"), sheet: of("--sheet"), series: [1, 2, 3, 4].map((n) => of("--series-" + n)) };
  }

  function spread(values) {
    const real = values.filter((value) => value !== null && Number.isFinite(value));
    return real.length ? Math.max(...real) - Math.min(...real) : 0;
  }

  function decimals(values) {
    const range = spread(values);
    return range >= 200 ? 0 : range >= 20 ? 1 : range >= 1 ? 2 : 4;
  }

  function say(value, places) {
    return value.toLocaleString("en", { minimumFractionDigits: places, maximumFractionDigits: places }).replace("-", "−");
  }

  const isPair = (chart) => chart.place.hasAttribute("data-compare") && chart.names.some((name) => chart.data.channels[name].compare);
  const differences = (channel) => channel.values.map((value, at) => (value === null || channel.compare[at] === null || channel.compare[at] === undefined ? null : value - channel.compare[at]));

  function traces(chart, palette) {
    const { time, channels, labels } = chart.data;
    const pair = isPair(chart);
    const made = [];
    chart.names.forEach(function (name, index) {
      const channel = channels[name];
      const places = decimals(channel.values);
      const line = { color: palette.series[index % 4], dash: DASHES[index % 4], width: 2 };
      const shown = `%{y:,.${places}f} ${channel.unit}`;
      const run = pair ? `${channel.label}, ${labels.run}` : channel.label;
      made.push({ x: time, y: channel.values, name: run, mode: "lines", line, hovertemplate: shown });
      if (!pair || !channel.compare) return;
      made.push({ x: time, y: channel.compare, name: `${channel.label}, ${labels.compare}`, mode: "lines", line: { ...line, dash: "dot", width: 1.6 }, hovertemplate: shown });
      made.push({ x: time, y: differences(channel), name: `${channel.label}, difference`, mode: "lines", line, yaxis: "y2", showlegend: false, hovertemplate: `%{y:+,.${places}f} ${channel.unit}` });
    });
    return made;
  }

  function marks(chart, palette) {
    const shapes = [], notes = [];
    chart.names.forEach(function (name, index) {
      const channel = chart.data.channels[name];
      if (channel.settled === undefined || channel.settled === null) return;
      const colour = palette.series[index % 4];
      shapes.push({ type: "line", xref: "paper", x0: 0, x1: 1, y0: channel.settled, y1: channel.settled, line: { color: colour, width: 1, dash: "dot" } });
      notes.push({ xref: "paper", x: 1, xanchor: "right", y: channel.settled, yanchor: index % 2 ? "top" : "bottom", showarrow: false, font: { color: colour, size: 11 }, text: "settles at " + say(channel.settled, decimals(channel.values)) });
    });
    (chart.data.events || []).forEach(function (event, index) {
      shapes.push({ type: "line", x0: event.time, x1: event.time, yref: "paper", y0: 0, y1: 1, line: { color: palette.faint, width: 1, dash: "dash" } });
      notes.push({ x: event.time, yref: "paper", y: 1, yanchor: "bottom", showarrow: false, text: String(index + 1), font: { color: palette.faint, size: 12 } });
    });
    return { shapes, annotations: notes };
  }

  function figure(chart, palette) {
    const pair = isPair(chart);
    const units = chart.data.channels[chart.names[0]].unit;
    const axis = { gridcolor: palette.hair, linecolor: palette.faint, zerolinecolor: palette.faint, zerolinewidth: 1, fixedrange: true, automargin: true, ticks: "outside", tickcolor: palette.faint, separatethousands: true };
    const layout = {
      ...marks(chart, palette),
      paper_bgcolor: palette.sheet, plot_bgcolor: palette.sheet,
      font: { color: palette.ink, size: 13, family: "system-ui, -apple-system, 'Segoe UI', Roboto, 'Noto Sans', 'DejaVu Sans', sans-serif" },
      margin: { l: 20, r: 14, t: 24, b: 20 },
      hovermode: "x unified", hoverlabel: { bgcolor: palette.sheet, bordercolor: palette.faint, font: { color: palette.ink } },
      dragmode: matchMedia("(pointer: coarse)").matches ? false : "zoom",
      showlegend: pair || chart.names.length > 1, legend: { orientation: "h", y: -0.22, yanchor: "top", x: 0 },
      xaxis: { ...axis, fixedrange: false, anchor: pair ? "y2" : "y", title: { text: `Time, ${chart.data.unit}`, standoff: 6 }, range: chart.span, hoverformat: ".3f", unifiedhovertitle: { text: `at %{x:.3f} ${chart.data.unit}` }, zeroline: false },
      yaxis: { ...axis, title: { text: units, standoff: 6 }, domain: pair ? [0.36, 1] : [0, 1] },
    };
    if (pair) layout.yaxis2 = { ...axis, title: { text: "difference", standoff: 6 }, domain: [0, 0.26] };
    return { data: traces(chart, palette), layout };
  }

  function inWords(chart) {
    const { time, unit, channels } = chart.data;
    return chart.names.map(function (name) {
      const { label, unit: of, values } = channels[name];
      const real = values.filter((value) => value !== null);
      if (!real.length) return `${label}: no values`;
      const high = Math.max(...real), low = Math.min(...real), places = decimals(values);
      return `${label}: greatest ${say(high, places)} ${of} at ${time[values.indexOf(high)].toFixed(3)} ${unit}, least ${say(low, places)} ${of} at ${time[values.indexOf(low)].toFixed(3)} ${unit}`;
    }).join(". ");
  }

  function element(name, properties, ...children) {
    const made = Object.assign(document.createElement(name), properties);
    made.append(...children);
    return made;
  }

  function takeAway(address, name) {
    element("a", { href: address, download: name }).click();
  }

  const fileName = (chart, ending) => (chart.place.dataset.title || "chart").toLowerCase().replace(/[^a-z0-9]+/g, "-") + "." + ending;

  async function asPicture(chart) {
    const drawn = figure(chart, PAPER);
    drawn.layout.title = { text: chart.place.dataset.title, x: 0.02, y: 0.97, yanchor: "top" };
    drawn.layout.margin = { l: 30, r: 30, t: 70, b: 40 };
    takeAway(await Plotly.toImage(drawn, { format: "png", width: 1200, height: isPair(chart) ? 800 : 600, scale: 2 }), fileName(chart, "png"));
  }

  function asTable(chart) {
    const { time, unit, channels, labels } = chart.data;
    const columns = [[`Time, ${unit}`, time]];
    for (const name of chart.names) {
      const channel = channels[name];
      columns.push([`${channel.label}, ${labels && labels.run ? labels.run + ", " : ""}${channel.unit}`, channel.values]);
      if (isPair(chart) && channel.compare) {
        columns.push([`${channel.label}, ${labels.compare}, ${channel.unit}`, channel.compare], [`${channel.label}, difference, ${channel.unit}`, differences(channel)]);
      }
    }
    // A name that begins like a formula is kept as words, whatever opens the file.
    const words = (text) => `"${(/^[=+\-@]/.test(text) ? "'" : "") + text.replaceAll('"', '""')}"`;
    const lines = [columns.map(([head]) => words(head)).join(",")];
    time.forEach((_, at) => lines.push(columns.map(([, values]) => (values[at] === null || values[at] === undefined ? "" : values[at])).join(",")));
    const address = URL.createObjectURL(new Blob([lines.join("\r\n") + "\r\n"], { type: "text/csv" }));
    takeAway(address, fileName(chart, "csv"));
    setTimeout(() => URL.revokeObjectURL(address), 10000);
  }

  function spanAll(span, except) {
    passing = true;
    const told = charts.filter((chart) => chart !== except && chart.plot.isConnected).map(function (chart) {
      chart.span = span;
      return Plotly.relayout(chart.plot, span ? { "xaxis.range": span } : { "xaxis.autorange": true });
    });
    if (except) except.span = span;
    Promise.all(told).finally(() => (passing = false));
  }

  function link(chart) {
    chart.plot.on("plotly_relayout", function (change) {
      if (passing) return;
      if (change["xaxis.autorange"]) spanAll(undefined, chart);
      else if (change["xaxis.range[0]"] !== undefined) spanAll([change["xaxis.range[0]"], change["xaxis.range[1]"]], chart);
    });
    const others = () => charts.filter((other) => other !== chart && other.plot.isConnected);
    chart.plot.on("plotly_hover", function (seen) {
      // The last argument: the chart that is told does not tell it back.
      if (seen.points.length) for (const other of others()) Plotly.Fx.hover(other.plot, { xval: seen.points[0].x }, isPair(other) ? ["xy", "xy2"] : "xy", true);
    });
    chart.plot.on("plotly_unhover", function () {
      for (const other of others()) Plotly.Fx.unhover(other.plot);
    });
  }

  function spanButtons(container, last) {
    if (!container || container.previousElementSibling?.classList.contains("spans")) return;
    const row = element("div", { className: "spans no-print" });
    row.setAttribute("role", "group");
    row.setAttribute("aria-label", "Time shown");
    for (const end of [0.1, 0.25, 0.5, 1].filter((end) => end < last)) {
      row.append(element("button", { type: "button", textContent: `first ${end} s`, onclick: () => spanAll([0, end]) }));
    }
    row.append(element("button", { type: "button", textContent: "all of it", onclick: () => spanAll(undefined) }));
    container.before(row);
  }

  function empty(place, why) {
    place.replaceChildren(element("h3", { textContent: place.dataset.title }), element("p", { className: "why-empty", textContent: why }));
  }

  function fault(data, names) {
    if (data.why_empty) return data.why_empty;
    const missing = names.filter((name) => !data.channels[name]);
    if (missing.length) return `This run has no ${missing.join(", no ").replaceAll("_", " ")}.`;
    if (!data.time.length || names.every((name) => data.channels[name].values.every((value) => value === null))) return "This run holds no values of it.";
    if (new Set(names.map((name) => data.channels[name].unit)).size > 1) return "These are in different units and cannot share one chart.";
    return "";
  }

  function draw(place, data, first) {
    const names = place.dataset.series.split(",").map((name) => name.trim());
    const why = fault(data, names);
    if (why) return empty(place, why);
    const chart = { place, data, names, plot: element("div", { className: "plot" }), span: undefined };
    if (isPair(chart)) chart.plot.classList.add("pair");
    chart.plot.setAttribute("role", "img");
    chart.plot.setAttribute("aria-label", inWords(chart));
    const button = (words, label, onclick) => element("button", { type: "button", textContent: words, title: label, ariaLabel: `${place.dataset.title}: ${label}`, onclick });
    place.replaceChildren(
      element("header", {}, element("h3", { textContent: place.dataset.title }), button("PNG", "take away as a picture", () => asPicture(chart)), button("CSV", "take away as a table", () => asTable(chart))),
      chart.plot,
    );
    if (first && (data.events || []).length) {
      place.append(element("ol", { className: "marks" }, ...data.events.map((event, at) => element("li", { textContent: `${at + 1} ${event.label}, ${event.time.toFixed(3)} ${data.unit}` }))));
    }
    const drawn = figure(chart, colours());
    charts.push(chart);
    return Plotly.newPlot(chart.plot, drawn.data, drawn.layout, { displayModeBar: false, responsive: true, showTips: false }).then(() => link(chart));
  }

  async function fetched(address) {
    const answer = await fetch(address, { headers: { Accept: "application/json" }, credentials: "same-origin" });
    if (!answer.ok || answer.redirected) throw new Error(String(answer.status));
    return answer.json();
  }

  function start(root) {
    const places = [...root.querySelectorAll(".chart[data-src]:not([data-drawn])"), ...(root.matches?.(".chart[data-src]:not([data-drawn])") ? [root] : [])];
    const sources = Map.groupBy ? Map.groupBy(places, (place) => place.dataset.src) : places.reduce((found, place) => found.set(place.dataset.src, [...(found.get(place.dataset.src) || []), place]), new Map());
    for (const [address, group] of sources) {
      for (const place of group) {
        place.dataset.drawn = "yes";
        place.replaceChildren(element("p", { className: "why-empty", textContent: "Fetching the curves…" }));
      }
      fetched(address).then(function (data) {
        group.forEach((place, index) => draw(place, data, index === 0));
        if (!data.why_empty && data.time.length) spanButtons(group[0].closest(".charts"), data.time.at(-1));
      }).catch((error) => group.forEach((place) => empty(place, `The curves could not be fetched (${error.message}). Load the page again; if it stays so, the server is not reached.`)));
    }
  }

  function redraw() {
    for (const chart of charts.filter((chart) => chart.plot.isConnected)) {
      const drawn = figure(chart, colours());
      Plotly.react(chart.plot, drawn.data, drawn.layout);
      Plotly.Plots.resize(chart.plot);
    }
  }

  document.addEventListener("DOMContentLoaded", () => start(document));
  document.addEventListener("htmx:load", (event) => start(event.detail.elt));
  document.addEventListener("themechange", redraw);
  for (const media of ["(prefers-color-scheme: dark)", "print"]) matchMedia(media).addEventListener("change", redraw);
})();
