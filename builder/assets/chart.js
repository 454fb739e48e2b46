/* A chart of lines and bands over one quantity, in SVG.

   const chart = new beadroll.Chart(element, { toggled: (key, hidden) => … });
   chart.show({
     title: "…", summary: "…",       names the chart and says in words what it shows
     x: axis, y: axis,               axis: { label, log, text }; text turns a value into a tick's text;
                                     y also: values (those that must be on the axis), least (its smallest length)
     at: (x) => "at 25 °C",          how the read-out says where it is
     along: [...],                   places along x, rising, the same for every series
     series: [{ key, name, number, values, low, high, far, hidden, text }],
                                     number, 1 to 6, chooses colour and dashes and stands at the line's end; low and
                                     high are the band's edges, if any; far says where a value is extrapolated;
                                     text(i) is the read-out at place i
   });
   chart.svg()                       the chart with its legend as an SVG text, in light colours, its styles in it
   chart.png()                       the same as a promise of a PNG
   What is not a number leaves a gap. Arrow keys, Page Up, Page Down, Home and End move the reading; Escape ends it. */
window.beadroll = window.beadroll || {};
(() => {
  const SVG = "http://www.w3.org/2000/svg";
  const MARGIN = { top: 26, right: 26, bottom: 40 };
  const LETTER = 7; // width of a figure of the ticks' size, in pixels
  const LINE = 13; // least distance of two numbers at line ends
  const EXPORT = { width: 860, height: 460, line: 22 };
  const PAPER = { width: 640, height: 370 };
  const FAR = "extrapolated";
  const HINT = "Point at the chart, or use the arrow keys, to read it off.";
  const STEPS = [1, 2, 2.5, 5, 10];
  const JUMP = 10; // places that Page Up and Page Down move
  const STYLES = [
    "fill", "fill-opacity", "stroke", "stroke-width", "stroke-dasharray", "stroke-linecap", "stroke-linejoin",
    "opacity", "font-family", "font-size", "font-weight", "text-anchor",
  ];
  let made = 0;

  function svgElement(name, attributes = {}, ...content) {
    const element = document.createElementNS(SVG, name);
    for (const [key, value] of Object.entries(attributes)) element.setAttribute(key, value);
    element.append(...content);
    return element;
  }

  function element(name, attributes = {}, ...content) {
    const created = document.createElement(name);
    for (const [key, value] of Object.entries(attributes)) created.setAttribute(key, value);
    created.append(...content);
    return created;
  }

  /* ---- Axes ---- */

  function niceStep(wanted) {
    const power = 10 ** Math.floor(Math.log10(wanted));
    return power * STEPS.find((digit) => digit * power >= wanted * (1 - 1e-9));
  }

  /* Multiples are exact to the digits that a step has; sums are not. */
  const multiple = (i, step) => Number((i * step).toPrecision(12));

  function linearTicks(low, high, step) {
    const ticks = [];
    for (let i = Math.ceil(low / step - 1e-9); i * step <= high + 1e-9 * step; i += 1) ticks.push(multiple(i, step));
    return ticks;
  }

  function logTicks(low, high, most) {
    const decades = Math.round(Math.log10(high / low)), every = Math.ceil(decades / most);
    const ticks = [];
    for (let i = 0; i <= decades; i += every) ticks.push(Number((low * 10 ** i).toPrecision(12)));
    return ticks;
  }

  /* What lies between the whole decades of a short axis. */
  function minorTicks(low, high) {
    if (high / low > 1e4) return [];
    const ticks = [];
    for (let decade = low; decade < high * 0.99; decade *= 10) for (let i = 2; i < 10; i += 1) ticks.push(i * decade);
    return ticks;
  }

  /* An axis between two pixels; a tight one ends where its values end, another at a tick. */
  function scaled(axis, values, from, to, { ticks: most, tight }) {
    const seen = values.filter((value) => Number.isFinite(value) && (!axis.log || value > 0));
    let low = Math.min(...seen), high = Math.max(...seen), ticks;
    if (!seen.length) [low, high] = axis.log ? [1, 10] : [0, 1];
    if (axis.log) {
      low = 10 ** Math.floor(Math.log10(low) + 1e-9);
      high = Math.max(10 * low, 10 ** Math.ceil(Math.log10(high) - 1e-9));
      ticks = logTicks(low, high, most);
    } else {
      const lacking = Math.max(axis.least ?? 0, high > low ? 0 : 1) - (high - low);
      if (lacking > 0) [low, high] = [low - lacking / 2, high + lacking / 2];
      const step = niceStep((high - low) / most);
      if (!tight) {
        low = multiple(Math.floor(low / step + 1e-9), step);
        high = multiple(Math.ceil(high / step - 1e-9), step);
      }
      ticks = linearTicks(low, high, step);
    }
    const place = axis.log ? Math.log : (value) => value;
    const first = place(low), length = place(high) - first;
    const at = (value) => from + (to - from) * (place(value) - first) / length;
    return { low, high, ticks, minor: axis.log ? minorTicks(low, high) : [], at };
  }

  /* ---- Marks ---- */

  const joined = (points) => points.map(([x, y], i) => `${i ? "L" : "M"}${x.toFixed(1)} ${y.toFixed(1)}`).join("");

  const dot = ([x, y]) => `M${(x - 1).toFixed(1)} ${y.toFixed(1)}h2`;

  /* Stretches of places at which a test holds. */
  function runs(count, holds) {
    const found = [];
    for (let i = 0; i < count; i += 1) {
      if (!holds(i)) continue;
      if (i && holds(i - 1)) found[found.length - 1].push(i);
      else found.push([i]);
    }
    return found;
  }

  /* The places drawn as known and those drawn as extrapolated; the step from one to the other is extrapolated. */
  function nearAndFar(count, exists, far) {
    const near = runs(count, (i) => exists(i) && !far[i]);
    const beside = (i) => far[i] || far[i - 1] || far[i + 1];
    return { near, far: runs(count, (i) => exists(i) && beside(i)) };
  }

  /* Numbers at line ends, pushed apart where they would lie over one another. */
  function spread(labels, top, bottom) {
    labels.sort((a, b) => a.y - b.y);
    labels.forEach((label, i) => {
      label.y = Math.max(label.y, top, i ? labels[i - 1].y + LINE : -Infinity);
    });
    let limit = bottom;
    for (const label of labels.toReversed()) {
      label.y = Math.min(label.y, limit);
      limit = label.y - LINE;
    }
    return labels;
  }

  /* ---- One drawing ---- */

  class Drawing {
    constructor(svg, data, width, height) {
      Object.assign(this, { svg, data, width, height });
      this.shown = data.series.filter((series) => !series.hidden);
      const bottom = height - MARGIN.bottom;
      this.y = scaled(data.y, this.upright(), bottom, MARGIN.top, { ticks: Math.max(3, Math.floor(height / 55)) });
      const longest = Math.max(...this.y.ticks.map((tick) => data.y.text(tick).length));
      this.left = 12 + LETTER * longest;
      this.right = width - MARGIN.right;
      const across = { ticks: Math.max(3, Math.floor(width / 80)), tight: true };
      this.x = scaled(data.x, data.along, this.left, this.right, across);
      this.clip = `bd-chart-clip-${(made += 1)}`;
      svg.setAttribute("viewBox", `0 0 ${width} ${height}`);
      svg.replaceChildren(this.clipPath(), ...this.frame(), this.marks(), ...this.ends());
    }

    upright() {
      const drawn = this.shown.flatMap(({ values, low, high }) => [...values, ...(low ?? []), ...(high ?? [])]);
      return [...(this.data.y.values ?? []), ...drawn];
    }

    clipPath() {
      const { left, right, height } = this;
      const area = { x: left, y: MARGIN.top, width: right - left, height: height - MARGIN.top - MARGIN.bottom };
      return svgElement("clipPath", { id: this.clip }, svgElement("rect", area));
    }

    frame() {
      const { x, y, left, right, height, data } = this, bottom = height - MARGIN.bottom;
      const line = (kind, x1, y1, x2, y2) => svgElement("line", { class: kind, x1, y1, x2, y2 });
      const across = (kind) => (tick) => line(kind, left, y.at(tick), right, y.at(tick));
      const up = (kind) => (tick) => line(kind, x.at(tick), MARGIN.top, x.at(tick), bottom);
      const text = (kind, at, down, said) => svgElement("text", { class: kind, x: at, y: down }, said);
      return [
        ...y.minor.map(across("bdc-minor")),
        ...x.minor.map(up("bdc-minor")),
        ...y.ticks.map(across("bdc-grid")),
        ...x.ticks.map(up("bdc-grid")),
        ...(!data.y.log && y.low < 0 && y.high > 0 ? [across("bdc-zero")(0)] : []),
        ...y.ticks.map((tick) => text("bdc-end", left - 6, y.at(tick) + 4, data.y.text(tick))),
        ...x.ticks.map((tick) => text("bdc-middle", x.at(tick), bottom + 16, data.x.text(tick))),
        text("bdc-label", 0, 13, data.y.label),
        text("bdc-middle bdc-label", (left + right) / 2, height - 6, data.x.label),
      ];
    }

    marks() {
      const bands = this.shown.filter((series) => series.low).flatMap((series) => this.band(series));
      const lines = this.shown.flatMap((series) => this.line(series));
      return svgElement("g", { "clip-path": `url(#${this.clip})` }, ...bands, ...lines);
    }

    point(values, i) {
      const { y, height } = this;
      // Far outside, a line keeps its direction and a renderer its numbers.
      return [this.x.at(this.data.along[i]), Math.min(Math.max(y.at(values[i]), -20 * height), 20 * height)];
    }

    drawable(values) {
      return (i) => Number.isFinite(this.y.at(values[i]));
    }

    line({ number, values, far }) {
      const parts = nearAndFar(values.length, this.drawable(values), far);
      const stretch = (run) => {
        const places = run.map((i) => this.point(values, i));
        return run.length > 1 ? joined(places) : dot(places[0]);
      };
      const path = (found, kind) => svgElement("path", {
        class: `bdc-line bdc-s${number} ${kind}`,
        d: found.map(stretch).join(""),
      });
      return [path(parts.far, "bdc-far"), path(parts.near, "")];
    }

    band({ number, low, high, far }) {
      const [isLow, isHigh] = [this.drawable(low), this.drawable(high)];
      const parts = nearAndFar(low.length, (i) => isLow(i) && isHigh(i), far);
      const edge = (values, run) => run.map((i) => this.point(values, i));
      return Object.entries(parts).flatMap(([kind, found]) => [
        svgElement("path", {
          class: `bdc-band bdc-s${number} bdc-${kind}`,
          d: found.map((run) => `${joined([...edge(low, run), ...edge(high, run).reverse()])}z`).join(""),
        }),
        svgElement("path", {
          class: `bdc-edge bdc-s${number} bdc-${kind}`,
          d: found.map((run) => joined(edge(low, run)) + joined(edge(high, run))).join(""),
        }),
      ]);
    }

    ends() {
      const labels = this.shown.map(({ number, values }) => {
        const last = values.findLastIndex((_, i) => this.drawable(values)(i));
        if (last < 0) return null;
        const [x, y] = this.point(values, last);
        return { number, x: x + 6, y: y + 4 };
      });
      return spread(labels.filter(Boolean), MARGIN.top + 4, this.height - MARGIN.bottom + 4).map(({ number, x, y }) =>
        svgElement("text", { class: `bdc-number bdc-s${number}`, x: Math.min(x, this.right + 6), y }, String(number)));
    }

    /* The place nearest to a pixel. */
    placeAt(pixel) {
      let nearest = 0;
      this.data.along.forEach((t, i) => {
        if (Math.abs(this.x.at(t) - pixel) < Math.abs(this.x.at(this.data.along[nearest]) - pixel)) nearest = i;
      });
      return nearest;
    }

    cursor(i) {
      const x = this.x.at(this.data.along[i]);
      const dots = this.shown.filter(({ values }) => this.drawable(values)(i)).map(({ number, values }) => {
        const [cx, cy] = this.point(values, i);
        return svgElement("circle", { class: `bdc-dot bdc-s${number}`, cx, cy, r: 4 });
      });
      const upright = { x1: x, x2: x, y1: MARGIN.top, y2: this.height - MARGIN.bottom };
      const line = svgElement("line", { class: "bdc-cursor", ...upright });
      return svgElement("g", { "clip-path": `url(#${this.clip})` }, line, ...dots);
    }
  }

  function swatch(number, kind = "") {
    const line = svgElement("path", { class: `bdc-line bdc-s${number} ${kind}`, d: "M1 6h36" });
    const size = { viewBox: "0 0 38 12", width: 38, height: 12 };
    return svgElement("svg", { class: "bdc-swatch", ...size, "aria-hidden": "true" }, line);
  }

  /* ---- The chart on the page ---- */

  class Chart {
    constructor(root, { toggled = () => {} } = {}) {
      this.toggled = toggled;
      this.place = null;
      const id = `bd-chart-${(made += 1)}`;
      this.svgRoot = svgElement("svg", { "aria-hidden": "true", focusable: "false" });
      const slider = { role: "slider", tabindex: "0", "aria-describedby": id };
      this.plot = element("div", { class: "bd-chart-plot", ...slider }, this.svgRoot);
      this.summary = element("p", { class: "bd-chart-summary", id });
      this.where = element("p", { class: "bd-chart-at" });
      this.keys = element("ul", { class: "bd-chart-key" });
      root.classList.add("bd-chart");
      root.replaceChildren(this.plot, this.summary, this.where, this.keys);
      this.plot.addEventListener("keydown", (event) => this.pressed(event));
      this.plot.addEventListener("pointermove", (event) => this.pointed(event));
      this.plot.addEventListener("pointerdown", (event) => this.pointed(event));
      this.plot.addEventListener("pointerleave", (event) => {
        if (event.pointerType === "mouse" && document.activeElement !== this.plot) this.read(null);
      });
      this.plot.addEventListener("blur", () => this.read(null));
      new ResizeObserver(() => {
        // Its height follows from the drawing; only another width asks for another one.
        if (this.plot.clientWidth !== this.room) this.draw();
      }).observe(this.plot);
      // Paper takes the picture as it was drawn, so it is drawn for paper first.
      addEventListener("beforeprint", () => this.draw(PAPER));
      addEventListener("afterprint", () => this.draw());
    }

    show(data) {
      const kept = this.place === null ? null : this.data.along[this.place];
      this.data = data;
      const place = data.along.indexOf(kept);
      this.place = place < 0 ? null : place;
      this.plot.setAttribute("aria-label", data.title);
      this.summary.textContent = data.summary;
      this.keys.replaceChildren(...data.series.map((series) => this.key(series)));
      if (this.anyFar()) this.keys.append(element("li", { class: "bd-chart-note" }, swatch(0, "bdc-far"), FAR));
      this.draw();
    }

    anyFar() {
      return this.data.series.some(({ far }) => far.some(Boolean));
    }

    key(series) {
      const name = element("span", { class: "bd-chart-name" }, series.name);
      const number = element("b", { class: `bdc-number bdc-s${series.number}` }, String(series.number));
      const button = element("button", { type: "button" }, swatch(series.number), number, name);
      button.setAttribute("aria-pressed", String(!series.hidden));
      button.title = "Show or hide";
      button.addEventListener("click", () => {
        series.hidden = !series.hidden;
        button.setAttribute("aria-pressed", String(!series.hidden));
        this.draw();
        this.toggled(series.key, series.hidden);
      });
      return element("li", {}, button, element("span", { class: "bd-chart-value" }));
    }

    sizeOnScreen() {
      const width = Math.round(this.plot.clientWidth);
      return { width, height: Math.round(Math.min(Math.max(0.5 * width, 260), 420)) };
    }

    draw({ width, height } = this.sizeOnScreen()) {
      if (!width || !this.data) return;
      this.room = this.plot.clientWidth;
      this.drawing = new Drawing(this.svgRoot, this.data, width, height);
      this.cursor = null;
      this.read(this.place);
    }

    /* Read all lines off at a place; null ends the reading. */
    read(place) {
      if (!this.drawing) return;
      const { along, at, series } = this.data;
      this.place = place;
      this.cursor?.remove();
      this.cursor = place === null ? null : this.drawing.cursor(place);
      if (this.cursor) this.svgRoot.append(this.cursor);
      const texts = series.map((one) => (place === null || one.hidden ? "" : one.text(place)));
      series.forEach((_, i) => { this.keys.children[i].lastElementChild.textContent = texts[i]; });
      this.where.textContent = place === null ? HINT : at(along[place]);
      const said = series.map((one, i) => texts[i] && `${one.name} ${texts[i]}`).filter(Boolean);
      this.plot.setAttribute("aria-valuemin", along[0]);
      this.plot.setAttribute("aria-valuemax", along.at(-1));
      this.plot.setAttribute("aria-valuenow", along[place ?? 0]);
      this.plot.setAttribute("aria-valuetext", place === null ? "not reading" : [at(along[place]), ...said].join(", "));
    }

    pointed(event) {
      const box = this.svgRoot.getBoundingClientRect();
      if (this.drawing) this.read(this.drawing.placeAt((event.clientX - box.left) * this.drawing.width / box.width));
    }

    pressed(event) {
      if (!this.drawing || event.ctrlKey || event.metaKey || event.altKey) return;
      const last = this.data.along.length - 1, here = this.place;
      const step = (by) => (here === null ? Math.round(last / 2) : Math.min(Math.max(here + by, 0), last));
      const moves = {
        ArrowRight: () => step(1), ArrowUp: () => step(1), ArrowLeft: () => step(-1), ArrowDown: () => step(-1),
        PageUp: () => step(JUMP), PageDown: () => step(-JUMP), Home: () => 0, End: () => last, Escape: () => null,
      };
      if (!Object.hasOwn(moves, event.key)) return;
      event.preventDefault();
      this.read(moves[event.key]());
    }

    /* ---- Files ---- */

    svg() {
      const { width, height, line } = EXPORT, shown = this.data.series.filter((series) => !series.hidden);
      const key = shown.map(({ number, name }) => ({ number, name, kind: "" }));
      if (this.anyFar()) key.push({ number: 0, name: FAR, kind: "bdc-far" });
      const total = height + line * (key.length + 2);
      const picture = svgElement("svg", { width, height: total, class: "bd-chart-file" });
      const plot = svgElement("svg", { y: line, width, height });
      // Light colours on white, whatever the page has: the file is put into a report.
      const host = element("div", { class: "bd-chart bd-chart-host", "data-md-color-scheme": "default" }, picture);
      document.body.append(host);
      new Drawing(plot, this.data, width, height);
      const legend = key.map(({ number, name, kind }, i) => svgElement(
        "g", { transform: `translate(8 ${line + height + line * (i + 0.7)})` },
        svgElement("path", { class: `bdc-line bdc-s${number} ${kind}`, d: "M0 -4h36" }),
        svgElement("text", { class: `bdc-number bdc-s${number}`, x: 46 }, number ? String(number) : ""),
        svgElement("text", { x: 62 }, name),
      ));
      const ground = svgElement("rect", { class: "bdc-ground", width, height: total });
      const title = svgElement("text", { class: "bdc-title", x: 8, y: 16 }, this.data.title);
      picture.setAttribute("viewBox", `0 0 ${width} ${total}`);
      picture.append(svgElement("title", {}, this.data.title), ground, title, plot, ...legend);
      for (const drawn of picture.querySelectorAll("rect, line, path, text, circle")) inlineStyle(drawn);
      host.remove();
      return new XMLSerializer().serializeToString(picture);
    }

    async png(times = 2) {
      const picture = new Image();
      picture.src = `data:image/svg+xml;charset=utf-8,${encodeURIComponent(this.svg())}`;
      await picture.decode();
      const canvas = element("canvas", { width: times * picture.width, height: times * picture.height });
      canvas.getContext("2d").drawImage(picture, 0, 0, canvas.width, canvas.height);
      return new Promise((resolve) => { canvas.toBlob(resolve, "image/png"); });
    }
  }

  /* The file stands alone: what the page's style says of an element is written into it. */
  function inlineStyle(drawn) {
    const style = getComputedStyle(drawn);
    for (const name of STYLES) {
      const value = style.getPropertyValue(name);
      if (value) drawn.setAttribute(name, value);
    }
    drawn.removeAttribute("class");
  }

  beadroll.Chart = Chart;
})();
