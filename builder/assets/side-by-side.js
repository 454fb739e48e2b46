/* The Side by side page: parts chosen, their curves loaded, read through one another, drawn and listed.

   The address holds the view:
     side-by-side.html#reference=KEY&parts=KEY,KEY&from=-40&to=125&step=5&view=reads&hidden=KEY
   KEY is the path of a part's page below parts/ without .html, such as tarnbrook-ceramics/tb3a-103f38. `reference` is
   the part that the firmware was made for, first of `parts` where it is left out, put before them where they do not
   name it.
   from and to are whole °C (without them the range that all parts are made for), step is 1, 5 or 10 K, view is reads,
   ratio or resistance, and hidden names parts whose lines are not drawn. */
window.beadroll = window.beadroll || {};
(() => {
  const MOST_PARTS = 6;
  const OPTIONS = 12; // parts listed while a number is typed
  const STEPS = [1, 5, 10];
  const PAPER_STEPS = [1, 5, 10, 20, 50], PAPER_ROWS = 34;
  const COLDEST_C = -273, HOTTEST_C = 1000;
  const SAME_K = 0.01; // hundredths of a kelvin are what a sentence shows
  const SAME_RATIO = 1e-6; // bands of equal parts differ by rounding of this size

  /* ---- Texts ---- */

  const minus = (text) => text.replaceAll("-", "−");
  const numberText = (value) => minus(String(Number(value.toPrecision(6))));
  const rangeText = ([low, high]) => `${numberText(low)} to ${numberText(high)} °C`;
  const degrees = (tC) => `${numberText(tC)} °C`;

  function signed(value, decimals) {
    if (!Number.isFinite(value)) return "–";
    const text = Math.abs(value).toFixed(decimals);
    return `${Number(text) === 0 ? "" : value > 0 ? "+" : "−"}${text}`;
  }

  /* Five digits, zeros at the end kept, so that the figures of a column can be compared. */
  function ohms(value) {
    if (!Number.isFinite(value)) return "–";
    const digits = 4 - Math.floor(Math.log10(value));
    return digits > 8 || digits < -5 ? minus(value.toExponential(4)) : value.toFixed(Math.max(digits, 0));
  }

  function ohmTick(value) {
    const [factor, unit] = [[1e6, "MΩ"], [1e3, "kΩ"], [1, "Ω"]].find(([least]) => value >= least) ?? [1, "Ω"];
    return `${numberText(value / factor)} ${unit}`;
  }

  const count = (n, what) => `${n} ${what}${n === 1 ? "" : "s"}`;

  /* ---- The three views: what of a comparison's row is shown, and when it rests on an extrapolation ---- */

  const readingFar = (row) => row.otherFar || row.readsFar;
  const difference = {
    text: (value) => signed(value, 2),
    axis: { values: [0], least: 0.1, text: (value) => signed(value, 6).replace(/\.?0+$/, "") || "0" },
  };

  const VIEWS = {
    reads: {
      title: (name) => `What each part reads if the firmware was made for ${name}`,
      unit: "K", label: "Reads (K): + reads high",
      values: (row) => [row.reads, row.readsMin, row.readsMax],
      isFar: readingFar,
      ...difference,
    },
    ratio: {
      title: (name) => `Resistance of each part above that of ${name}`,
      unit: "%", label: "Resistance above the reference’s (%)",
      values: (row) => [row.ratioPct, (row.low / row.rRef - 1) * 100, (row.high / row.rRef - 1) * 100],
      isFar: (row) => row.otherFar || row.referenceFar,
      ...difference,
    },
    resistance: {
      title: () => "Resistance of each part",
      unit: "Ω", label: "Resistance",
      values: (row) => [row.r, row.low, row.high],
      text: ohms,
      isFar: (row) => row.otherFar,
      axis: { log: true, text: ohmTick },
    },
  };

  /* ---- A comparison in one sentence, as comparisons/sentence.py says it ---- */

  function sentence(referenceName, otherName, { reference, other, rows }) {
    const swap = `${otherName} in place of ${referenceName}`;
    const known = rows.filter((row) => Number.isFinite(row.reads));
    if (!known.length) return `${swap} cannot be compared ${where(rows)}: a curve ends before.`;
    const worst = known.reduce((a, b) => (Math.abs(b.reads) > Math.abs(a.reads) ? b : a));
    const clauses = [`${swap} ${nominal(worst, where(known))}`];
    const ends = known.flatMap((row) => [row.readsMin, row.readsMax]).filter(Number.isFinite).map(Math.abs);
    const withTolerance = Math.max(...ends);
    if (withTolerance > Math.abs(worst.reads) + 1e-6) {
      clauses.push(`up to ${withTolerance.toFixed(2)} K off with its tolerance`);
    }
    const doubts = [];
    if (rows.some((row) => other.isIncomplete(row.tC))) {
      doubts.push(`the tolerance of ${otherName} is not stated in full`);
    }
    if (rows.some((row) => row.readsFar)) {
      doubts.push(`readings outside ${rangeText(reference.spanC)} extrapolate the curve of ${referenceName}`);
    }
    if (rows.some((row) => row.otherFar)) {
      doubts.push(`the curve of ${otherName} is extrapolated outside ${rangeText(other.spanC)}`);
    }
    if (known.length < rows.length) {
      doubts.push(`a curve ends within the ${rangeText([rows[0].tC, rows.at(-1).tC])} asked for`);
    }
    if (known.some((row) => Number.isNaN(row.low))) {
      doubts.push(`the tolerance of ${otherName} is not shown outside ${rangeText(other.bandC)}`);
    }
    return `${[clauses.join(", "), ...doubts].join("; ")}.`;
  }

  function where(rows) {
    const low = rows[0].tC, high = rows.at(-1).tC;
    return low === high ? `at ${degrees(low)}` : `from ${rangeText([low, high])}`;
  }

  function nominal(worst, place) {
    if (Math.abs(worst.reads) < SAME_K) return `reads the same within ${SAME_K} K ${place}`;
    const amount = `${Math.abs(worst.reads).toFixed(2)} K ${worst.reads > 0 ? "high" : "low"}`;
    if (place.startsWith("at ")) return `reads ${amount} ${place}`;
    return `reads at most ${amount} (at ${degrees(worst.tC)}) ${place}`;
  }

  /* How the bands lie to each other, where both are shown. A band that lacks a tolerance is too narrow to lie within. */
  function bandSentence(otherName, referenceName, rows, other) {
    const known = rows.filter((row) => Number.isFinite(row.low + row.refLow));
    if (!known.length) return "";
    const isInside = ({ low, high, refLow, refHigh }) =>
      low >= refLow * (1 - SAME_RATIO) && high <= refHigh * (1 + SAME_RATIO);
    const within = known.every(isInside);
    if (within && known.some((row) => other.isIncomplete(row.tC))) return "";
    const place = known.length < rows.length ? ` ${where(known)}` : "";
    return `The tolerance of ${otherName} ${within ? "lies within" : "reaches outside"} that of ${referenceName}${place}.`;
  }

  /* ---- The parts that can be chosen ---- */

  const slug = (number) => number.toLowerCase().replace(/[^a-z0-9.]+/g, "-").replace(/^[-.]+|[-.]+$/g, "") || "x";
  const squeezed = (number) => number.replace(/[^\p{L}\p{N}]/gu, "");
  const plain = (text) => text.normalize("NFKC").toLowerCase();

  function choosable(data) {
    const parts = data.rows.map(([number, own, maker, rated, tolerance, , , body, , standing, , , file]) => {
      const [makerName, folder] = data.makers[maker], ohmText = data.rated[rated][2];
      const pct = data.tolerances[tolerance], value = pct[0] === null ? ohmText : `${ohmText} ${pct[1]}`;
      const values = [ohmText, ohmText.replace(" ", ""), ...data.bodies[body]];
      const said = [number, squeezed(number), own, squeezed(own), makerName, ...values];
      return {
        key: `${folder}/${(file ?? slug(number)).replace(/\.html$/, "")}`,
        number, maker: makerName, name: `${makerName} ${number}`,
        about: `${makerName}, ${value}, ${data.bodies[body].filter(Boolean).join(" ")}, ${data.standings[standing]}`,
        found: plain(said.join(" ")), start: plain(number),
      };
    });
    return new Map(parts.map((part) => [part.key, part]));
  }

  /* Parts that hold all words typed; those whose number begins so come first. */
  function matching(parts, text) {
    const words = plain(text).split(/\s+/).filter(Boolean);
    const found = [...parts.values()].filter((part) => words.every((word) => part.found.includes(word)));
    const begins = (part) => words.length > 0 && part.start.startsWith(words[0]);
    return [...found.filter(begins), ...found.filter((part) => !begins(part))];
  }

  /* ---- The view and its address ---- */

  const wholeDegree = (text) => (/^-?\d{1,4}$/.test(text ?? "") ? Number(text) : null);

  function viewFrom(hash, parts) {
    const params = new URLSearchParams(hash.replace(/^#/, "")), complaints = [];
    const reference = params.get("reference");
    const asked = (params.get("parts") ?? "").split(",").filter(Boolean);
    if (reference && !asked.includes(reference)) asked.unshift(reference);
    const keys = [...new Set(asked)];
    const known = keys.filter((key) => parts.has(key));
    for (const key of keys) if (!parts.has(key)) complaints.push(`“${key}” is not a part of this catalog.`);
    if (known.length > MOST_PARTS) complaints.push(`Only the first ${MOST_PARTS} parts are shown.`);
    const chosen = known.slice(0, MOST_PARTS);
    const from = wholeDegree(params.get("from")), to = wholeDegree(params.get("to"));
    const step = Number(params.get("step"));
    return {
      chosen,
      reference: chosen.includes(reference) ? reference : chosen[0] ?? null,
      range: isRange(from, to) ? [from, to] : null,
      step: STEPS.includes(step) ? step : 5,
      view: Object.hasOwn(VIEWS, params.get("view")) ? params.get("view") : "reads",
      hidden: new Set((params.get("hidden") ?? "").split(",").filter((key) => chosen.includes(key))),
      complaints,
    };
  }

  const isRange = (from, to) => from !== null && to !== null && from >= COLDEST_C && to <= HOTTEST_C && from < to;

  function hashOf({ chosen, reference, range, step, view, hidden }) {
    const params = [];
    if (chosen.length) params.push(`reference=${reference}`, `parts=${chosen.join(",")}`);
    if (range) params.push(`from=${range[0]}`, `to=${range[1]}`);
    if (step !== 5) params.push(`step=${step}`);
    if (view !== "reads") params.push(`view=${view}`);
    if (hidden.size) params.push(`hidden=${[...hidden].join(",")}`);
    return `#${params.join("&")}`;
  }

  /* ---- Parts of the page ---- */

  function element(name, attributes = {}, ...content) {
    const made = document.createElement(name);
    for (const [key, value] of Object.entries(attributes)) made.setAttribute(key, value);
    made.append(...content);
    return made;
  }

  /* A field that lists the parts that hold what is typed, after the combobox pattern of ARIA. */
  class PartField {
    constructor(field, list, { found, picked, said }) {
      Object.assign(this, { field, list, found, picked, said, active: -1, parts: [] });
      field.addEventListener("input", () => this.open());
      field.addEventListener("blur", () => this.close());
      field.addEventListener("keydown", (event) => this.pressed(event));
      list.addEventListener("mousedown", (event) => event.preventDefault()); // the field keeps the focus
      list.addEventListener("click", (event) => {
        const option = event.target.closest("[role=option]");
        if (option) this.pick([...list.children].indexOf(option));
      });
    }

    open() {
      const { found, note } = this.found(this.field.value);
      this.parts = found.slice(0, OPTIONS);
      this.list.replaceChildren(...this.parts.map((part, i) => element(
        "li", { role: "option", id: `bd-side-option-${i}`, "aria-selected": "false" },
        element("b", {}, part.number), " ", element("small", {}, part.about),
      )));
      this.expand(this.parts.length > 0);
      const listed = found.length > OPTIONS ? `, the first ${OPTIONS} listed` : "";
      this.said(note || `${count(found.length, "part")} found${listed}`);
      this.activate(this.field.value.trim() && this.parts.length ? 0 : -1);
    }

    expand(open) {
      this.list.hidden = !open;
      this.field.setAttribute("aria-expanded", String(open));
    }

    close() {
      this.expand(false);
      this.activate(-1);
    }

    activate(i) {
      this.active = i;
      [...this.list.children].forEach((option, at) => option.setAttribute("aria-selected", String(at === i)));
      if (i < 0) return this.field.removeAttribute("aria-activedescendant");
      this.field.setAttribute("aria-activedescendant", this.list.children[i].id);
      this.list.children[i].scrollIntoView({ block: "nearest" });
    }

    pick(i) {
      const part = this.parts[i];
      if (!part) return;
      this.field.value = "";
      this.close();
      this.picked(part);
    }

    pressed(event) {
      const isOpen = !this.list.hidden, n = this.parts.length;
      const keys = {
        ArrowDown: () => (isOpen ? this.activate((this.active + 1) % n) : this.open()),
        ArrowUp: () => (isOpen ? this.activate((Math.max(this.active, 0) - 1 + n) % n) : this.open()),
        Enter: () => isOpen && this.pick(this.active),
        Escape: () => {
          if (!isOpen) this.field.value = "";
          this.close();
        },
      };
      if (!Object.hasOwn(keys, event.key) || event.isComposing) return;
      event.preventDefault();
      keys[event.key]();
    }
  }

  /* Whole steps within the range, and both its ends. */
  const isListed = (row, i, rows, step) => i === 0 || i === rows.length - 1 || row.tC % step === 0;

  function figures(view, row) {
    const [value, low, high] = view.values(row).map(view.text);
    return [view.isFar(row) && value !== "–" ? `* ${value}` : value, low === "–" ? "–" : `${low} to ${high}`];
  }

  function heading({ part, number }, reference) {
    return `${number} ${part.number}${part.key === reference.key ? " (reference)" : ""}`;
  }

  function figuresTable(table, view, shown, reference, step) {
    const heads = shown.map((one) => element("th", { scope: "colgroup", colspan: "2" }, heading(one, reference)));
    const subheads = shown.flatMap(() => ["nominal", "with tolerance"]);
    table.tHead.replaceChildren(
      element("tr", {}, element("th", { scope: "col", rowspan: "2" }, "°C"), ...heads),
      element("tr", {}, ...subheads.map((text) => element("th", { scope: "col" }, text))),
    );
    const kind = (row) => (view.isFar(row) ? { class: "bd-far" } : {});
    const cells = (row) => figures(view, row).map((text) => element("td", kind(row), text));
    const line = (tC, i) => element(
      "tr", {}, element("th", { scope: "row" }, numberText(tC)), ...shown.flatMap(({ rows }) => cells(rows[i])),
    );
    const all = shown[0].rows;
    const lines = all.flatMap((row, i) => (isListed(row, i, all, step) ? [line(row.tC, i)] : []));
    table.tBodies[0].replaceChildren(...lines);
    const anyFar = shown.some(({ rows }) => rows.some(view.isFar));
    table.caption.textContent = `${view.label}, every ${step} K.${anyFar ? " * rests on an extrapolated curve." : ""}`;
  }

  function differencesTable(table, shown, reference) {
    const [corner] = table.tHead.rows[0].cells;
    const heads = shown.map((one) => element("th", { scope: "col" }, heading(one, reference)));
    table.tHead.rows[0].replaceChildren(corner, ...heads);
    [...table.tBodies[0].rows].forEach((row, i) => {
      row.replaceChildren(row.cells[0], ...shown.map(({ curve }) => {
        if (curve.facts[i] === reference.facts[i]) return element("td", {}, curve.facts[i]);
        return element("td", { class: "bd-side-differs" }, curve.facts[i], " ", element("small", {}, "differs"));
      }));
    });
  }

  const CSV_NAMES = [
    "reference", "part", "t_c", "r_ref_ohm", "r_ohm", "ratio_pct", "reads_k", "reads_min_k", "reads_max_k",
    "extrapolated",
  ];

  function csv(shown, reference, step) {
    const others = shown.filter(({ part }) => part.key !== reference.key);
    return beadroll.csv(CSV_NAMES, others.flatMap(({ part, rows }) => rows
      .filter((row, i) => isListed(row, i, rows, step))
      .map((row) => [
        reference.number, part.number, row.tC, row.rRef, row.r, row.ratioPct, row.reads, row.readsMin, row.readsMax,
        readingFar(row) ? "yes" : "no",
      ])));
  }

  /* ---- The page ---- */

  function start(root, data) {
    const parts = choosable(data);
    const find = (selector) => root.querySelector(selector);
    const form = find("form"), status = find(".bd-side-said"), list = find(".bd-side-parts ol");
    const result = find(".bd-side-result"), differences = find(".bd-side-differences");
    const sentences = find(".bd-side-sentences");
    const needReady = root.querySelectorAll(".bd-side-tools button:not([data-does=link])");
    const chart = new beadroll.Chart(find(".bd-side-chart"), { toggled: toggle });
    let state = viewFrom("", parts), shown = [], lastField = null, asked = 0;

    const say = (text) => { status.textContent = text; };

    /* The parts that can still be added, and what is said where there is more to say than how many. */
    function foundFor(text) {
      if (state.chosen.length >= MOST_PARTS) return { found: [], note: `${MOST_PARTS} parts are the most; remove one first.` };
      const holding = matching(parts, text), isChosen = ({ key }) => state.chosen.includes(key);
      const found = holding.filter((part) => !isChosen(part));
      const note = holding.length && !found.length ? `${holding.map(({ number }) => number).join(", ")}: chosen already.` : "";
      return { found, note };
    }

    const field = new PartField(find("#bd-side-find"), find("#bd-side-found"), {
      found: foundFor,
      said: say,
      picked: (part) => {
        state.chosen = [...state.chosen, part.key];
        state.reference ??= part.key;
        changed("parts", `${part.number} added.`);
      },
    });

    function remove(key) {
      state.chosen = state.chosen.filter((other) => other !== key);
      state.hidden.delete(key);
      if (state.reference === key) state.reference = state.chosen[0] ?? null;
      changed("parts", `${parts.get(key).number} removed.`);
      field.field.focus();
    }

    function toggle(key, hidden) {
      state.hidden[hidden ? "add" : "delete"](key);
      remember("hidden");
    }

    function chosenRow(key, i) {
      const part = parts.get(key), isReference = key === state.reference;
      const radio = element("input", { type: "radio", name: "reference", value: key });
      radio.checked = isReference;
      const away = element("button", { type: "button", "aria-label": `Remove ${part.number}` }, "Remove");
      away.addEventListener("click", () => remove(key));
      return element(
        "li", {},
        element("b", { class: `bdc-s${i + 1}` }, String(i + 1)),
        element("a", { href: `parts/${key}.html` }, part.number),
        element("span", { class: "bd-side-about" }, part.about),
        element("label", {}, radio, " reference"),
        away,
      );
    }

    /* The form as the view says; the list of parts keeps the focus on its radio button. */
    function fillForm() {
      const held = document.activeElement?.name === "reference" ? document.activeElement.value : null;
      list.replaceChildren(...state.chosen.map(chosenRow));
      if (held) [...list.querySelectorAll("input")].find((radio) => radio.value === held)?.focus();
      find(".bd-side-none").hidden = state.chosen.length > 0;
      form.elements.view.value = state.view;
      form.elements.step.value = String(state.step);
    }

    function fillRange([from, to]) {
      for (const [name, value] of [["from", from], ["to", to]]) {
        const input = form.elements[name];
        if (document.activeElement !== input) input.value = value;
        input.removeAttribute("aria-invalid");
      }
    }

    /* The range that all are made for; the reference's where they have none in common. */
    function commonRange(curves) {
      const low = Math.max(...curves.map((curve) => Math.ceil(curve.operatingC[0])));
      const high = Math.min(...curves.map((curve) => Math.floor(curve.operatingC[1])));
      return low < high ? [low, high] : null;
    }

    async function loaded(keys) {
      const settled = await Promise.allSettled(keys.map(beadroll.loadCurve));
      const failed = keys.filter((_, i) => settled[i].status === "rejected");
      const curves = new Map(settled.flatMap(({ value }) => (value ? [[value.key, value]] : [])));
      return { curves, complaints: failed.map((key) => `The curve of ${parts.get(key).number} could not be loaded.`) };
    }

    async function refresh(said = "") {
      const turn = (asked += 1);
      fillForm();
      const { curves, complaints } = await loaded(state.chosen);
      if (turn !== asked) return; // something else was chosen meanwhile
      const notes = [said, ...state.complaints, ...complaints, draw(curves)];
      say(notes.filter(Boolean).join(" "));
    }

    /* Draws what can be compared; what is lacking is returned as a sentence. */
    function draw(curves) {
      const keys = state.chosen.filter((key) => curves.has(key)), reference = curves.get(state.reference);
      const ready = keys.length > 1 && reference !== undefined;
      result.hidden = differences.hidden = !ready;
      for (const button of needReady) button.disabled = !ready;
      shown = [];
      if (!ready) return state.chosen.length === 1 ? "Choose a second part." : "";
      const common = commonRange(keys.map((key) => curves.get(key)));
      const range = state.range ?? common ?? reference.operatingC.map(Math.round);
      const tC = beadroll.wholeDegrees(...range);
      shown = keys.map((key) => {
        const part = parts.get(key), number = state.chosen.indexOf(key) + 1, curve = curves.get(key);
        return { part, number, curve, ...beadroll.compared(reference, curve, tC) };
      });
      fillRange(range);
      drawChart(tC);
      // Two thousand cells at 1 K take longer to lay out than all else: the chart is seen before them.
      requestAnimationFrame(() => setTimeout(() => fillTable()));
      differencesTable(differences.querySelector("table"), shown, reference);
      const lines = sentenceLines();
      sentences.replaceChildren(...lines.map((line) => element("li", {}, line)));
      return common ? "" : "The operating ranges do not meet; the reference’s is shown.";
    }

    function fillTable(step = state.step) {
      const reference = shown.find(({ part }) => part.key === state.reference);
      if (reference) figuresTable(find(".bd-side-rows table"), VIEWS[state.view], shown, reference.curve, step);
    }

    /* As many rows as fit on the page beside the chart; CSV has them all. */
    function paperStep() {
      const degrees = shown.length ? shown[0].rows.length - 1 : 0;
      return PAPER_STEPS.find((step) => step >= state.step && degrees / step < PAPER_ROWS) ?? PAPER_STEPS.at(-1);
    }

    function sentenceLines() {
      const reference = parts.get(state.reference);
      return shown.filter(({ part }) => part !== reference).map(({ part, ...comparison }) => [
        sentence(reference.name, part.name, comparison), bandSentence(part.name, reference.name, comparison.rows, comparison.curve),
      ].filter(Boolean).join(" "));
    }

    function drawChart(tC) {
      const view = VIEWS[state.view], title = view.title(parts.get(state.reference).name);
      find("#chart").textContent = title;
      chart.show({
        title,
        summary: sentenceLines().join(" "),
        along: tC,
        at: (t) => `at ${degrees(t)}`,
        x: { label: "Temperature (°C)", text: numberText },
        y: { label: view.label, ...view.axis },
        series: shown.map(({ part, number, rows }) => {
          const columns = rows.map(view.values);
          const [values, low, high] = [0, 1, 2].map((place) => columns.map((column) => column[place]));
          return {
            key: part.key, number, values, low, high,
            name: part.key === state.reference ? `${part.number} (reference)` : part.number,
            far: rows.map(view.isFar),
            hidden: state.hidden.has(part.key),
            text: (i) => `${figures(view, rows[i])[0]} ${view.unit} (${figures(view, rows[i])[1]})`,
          };
        }),
      });
    }

    /* ---- Address and history: one step back for one field, not for one letter ---- */

    function remember(changedField) {
      history[changedField === lastField ? "replaceState" : "pushState"](null, "", address());
      lastField = changedField === "parts" || changedField === "hidden" ? null : changedField;
    }

    function changed(changedField, said) {
      state.complaints = [];
      remember(changedField);
      return refresh(said);
    }

    function restore() {
      state = viewFrom(location.hash, parts);
      lastField = null;
      refresh();
    }

    function typedRange() {
      const { from, to } = form.elements;
      const range = [wholeDegree(from.value), wholeDegree(to.value)];
      const good = isRange(...range);
      for (const input of [from, to]) input.setAttribute("aria-invalid", String(!good));
      if (!good) return say("Write whole degrees, the lower one first.");
      state.range = range;
      changed("range");
    }

    const fields = {
      from: typedRange,
      to: typedRange,
      step: (value) => { state.step = Number(value); changed("step"); },
      view: (value) => { state.view = value; changed("view"); },
      reference: (value) => { state.reference = value; changed("reference"); },
    };

    function address() {
      return `${location.href.split("#")[0]}${hashOf(state)}`;
    }

    const fileName = (ending) => `side-by-side-${state.view}.${ending}`;
    const does = {
      async link() {
        await beadroll.copied(address());
        say("Link copied.");
      },
      async sentences() {
        await beadroll.copied(`${sentenceLines().join("\n")}\n`);
        say("Sentences copied.");
      },
      csv() {
        const text = csv(shown, parts.get(state.reference), state.step);
        beadroll.saved("side-by-side.csv", new Blob(["\ufeff", text], { type: "text/csv" }));
      },
      svg: () => beadroll.saved(fileName("svg"), new Blob([chart.svg()], { type: "image/svg+xml" })),
      png: async () => beadroll.saved(fileName("png"), await chart.png()),
      print: () => print(),
      common() {
        state.range = null;
        changed("common");
      },
    };

    form.addEventListener("submit", (event) => event.preventDefault());
    form.addEventListener("input", (event) => fields[event.target.name]?.(event.target.value));
    form.addEventListener("change", () => { lastField = null; });
    root.addEventListener("click", (event) => does[event.target.closest("button")?.dataset.does]?.());
    addEventListener("popstate", () => {
      // An anchor of the page is jumped to; the address goes on holding the view.
      if (/^#[^=]+$/.test(location.hash)) history.replaceState(null, "", address());
      else restore();
    });
    addEventListener("beforeprint", () => fillTable(paperStep()));
    addEventListener("afterprint", () => fillTable());

    root.hidden = false;
    restore();
  }

  document.addEventListener("DOMContentLoaded", () => {
    const root = document.getElementById("bd-side");
    if (!root) return;
    const needs = document.getElementById("bd-side-needs");
    if (!beadroll.parts) return needs.replaceChildren("The list of parts could not be loaded.");
    needs.remove();
    start(root, beadroll.parts);
  });
})();
