// One figure of a study against another: every choice a point, the ones no other beats joined; a click opens the choice.
(function () {
  const chooser = document.getElementById("tradeoff-choice");
  const place = document.getElementById("tradeoff");
  if (!chooser || !place) return;
  const pick = (id) => document.getElementById(id).value;

  function colours() {
    const style = getComputedStyle(document.documentElement);
    const of = (name) => style.getPropertyValue(name).trim();
    return { ink: of("--ink"), faint: of("--faint"), hair: of("--hair"), sheet: of("--sheet"), one: of("--series-1"), two: of("--series-2") };
  }

  function points(data, keep, names) {
    const x = [], y = [], text = [], numbers = [];
    for (let at = 0; at < data.count; at++) {
      const across = data.columns[names[0]].values[at], up = data.columns[names[1]].values[at];
      if (across === null || up === null || !keep(at)) continue;
      x.push(across); y.push(up); text.push(data.words[at]); numbers.push(at);
    }
    return { x, y, text, customdata: numbers };
  }

  // Marks lie on each other by the hundred; of those in one small square one is enough, and a tablet keeps up.
  function thin(trace) {
    const wide = Math.max(...trace.x) - Math.min(...trace.x) || 1, tall = Math.max(...trace.y) - Math.min(...trace.y) || 1;
    const taken = new Set(), kept = { x: [], y: [], text: [], customdata: [] };
    trace.x.forEach((x, at) => {
      const cell = Math.floor((200 * x) / wide) + " " + Math.floor((100 * trace.y[at]) / tall);
      if (taken.has(cell)) return;
      taken.add(cell);
      for (const name of Object.keys(kept)) kept[name].push(trace[name][at]);
    });
    Object.assign(trace, kept);
  }

  function axis(channel, ink) {
    const unit = channel.unit ? " (" + channel.unit + ")" : "";
    return { title: { text: channel.label + unit }, gridcolor: ink.hair, zerolinecolor: ink.faint, automargin: true };
  }

  function draw(data, names) {
    const ink = colours();
    const onFront = new Set(data.front);
    const line = { x: [], y: [], text: [], customdata: [] };
    for (const at of data.front) {
      line.x.push(data.columns[names[0]].values[at]); line.y.push(data.columns[names[1]].values[at]);
      line.text.push(data.words[at]); line.customdata.push(at);
    }
    const hover = "%{text}<br>%{x}, %{y}<extra></extra>";
    const traces = [
      { ...points(data, (at) => !data.meets[at], names), name: "outside the limits", mode: "markers", type: "scatter", hovertemplate: hover, marker: { color: ink.faint, symbol: "x-thin", line: { width: 1, color: ink.faint }, size: 6 } },
      { ...points(data, (at) => data.meets[at] && !onFront.has(at), names), name: "within the limits", mode: "markers", type: "scatter", hovertemplate: hover, marker: { color: ink.one, size: 6, opacity: 0.6 } },
      { ...line, name: "no other beats these", mode: "lines+markers", type: "scatter", hovertemplate: hover, marker: { color: ink.two, symbol: "diamond", size: 11 }, line: { color: ink.two, width: 1.5, dash: "dot" } },
    ];
    // Plain SVG where the browser has no WebGL.
    traces.slice(0, 2).forEach(thin);
    Plotly.react(place, traces, {
      paper_bgcolor: ink.sheet, plot_bgcolor: ink.sheet, font: { color: ink.ink }, margin: { t: 20, r: 20 }, height: 460,
      xaxis: axis(data.columns[names[0]], ink), yaxis: axis(data.columns[names[1]], ink), legend: { orientation: "h", y: -0.2 }, hovermode: "closest",
    }, { displayModeBar: false, responsive: true });
    place.removeAllListeners && place.removeAllListeners("plotly_click");
    place.on("plotly_click", (event) => { location.href = chooser.dataset.choice.replace(/0$/, event.points[0].customdata); });
  }

  let shown = null;
  async function load() {
    const names = [pick("across"), pick("up")];
    const query = new URLSearchParams({ figures: names.join(","), first: pick("across-way"), second: pick("up-way") });
    const answer = await fetch(chooser.dataset.src + "?" + query, { headers: { Accept: "application/json" } });
    if (!answer.ok) return;
    shown = { data: await answer.json(), names };
    if (!place.isConnected) return;
    draw(shown.data, names);
    if (shown.data.running) setTimeout(load, 2500);
  }
  chooser.addEventListener("change", load);
  document.addEventListener("themechange", () => shown && draw(shown.data, shown.names));
  addEventListener("load", load);
})();
