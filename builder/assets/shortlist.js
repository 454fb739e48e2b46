/* The Shortlist page: a position typed in, every part of the catalog judged and ranked in it, a slice at a time.

   The address holds every field of the form that is not as at first, by its name, with `find` (what the lists are
   searched for) and `take` (the part for the record):
     shortlist.html#range_from_c=-30&limit_k=1.6&method=curve&qualification=UL+1434&take=TB3A-103F38
   With `start` alone, a position's name, it begins with that position's circuit. */
window.beadroll = window.beadroll || {};
(() => {
  const FIRST_SLICE_MS = 6, SLICE_MS = 12, DRAW_EVERY_MS = 250;
  const FACTORS = { R: 1, K: 1e3, M: 1e6 };
  const OHMS = ["parallel_ohm", "wire_ohm"];
  const MOST_BITS = 32;
  const WARMTH_COUNTS = 0.1; // from this share of the limit on, as in circuit/gaps.py

  /* ---- Texts, as Python writes them ---- */

  const minus = (text) => text.replaceAll("-", "−");
  const numberText = (value, digits = 6) => minus(String(Number(value.toPrecision(digits))));
  const degrees = (tC) => `${numberText(tC)} °C`;
  const rangeText = ([low, high]) => `${numberText(low)} to ${numberText(high)} °C`;
  const count = (n, what) => `${n} ${what}${n === 1 ? "" : "s"}`;

  function ohmText(ohm) {
    const [factor, unit] = [[1e6, "MΩ"], [1e3, "kΩ"], [0, "Ω"]].find(([least]) => Number(ohm.toPrecision(5)) >= least);
    return `${numberText(ohm / (factor || 1), 5)} ${unit}`;
  }

  /* With as many more digits as keep it on its side of a limit. */
  function comparedText(value, limit, fewest) {
    let digits = fewest;
    while (digits < 17 && (Number(value.toPrecision(digits)) <= limit) !== (value <= limit)) digits += 1;
    return numberText(value, digits);
  }

  const signed = (value) => `${value < 0 ? "−" : "+"}${Math.abs(value).toFixed(3)}`;

  /* ---- The form ---- */

  function numberFrom(text, isOhms) {
    const plain = text.normalize("NFKC").replace(/\s/g, "").replace("−", "-").replace(/^(-?\d*),(\d+)$/, "$1.$2");
    const code = isOhms && /^(\d*)([RrKkM])(\d*)$/.exec(plain);
    if (code && (code[1] || code[3])) return Number(`${code[1] || 0}.${code[3] || 0}`) * FACTORS[code[2].toUpperCase()];
    return /^[-+]?(\d+\.?\d*|\.\d+)(e[-+]?\d+)?$/i.test(plain) ? Number(plain) : NaN;
  }

  const labelOf = (field) => field.closest("label").querySelector("span").textContent;

  /* What one field says: text, a number, or null where it is empty; and what is wrong with it. */
  function read(field) {
    const text = field.value.trim(), { low, high, needed, text: isText } = field.dataset;
    if (text === "") return { value: null, wrong: needed !== undefined && "is needed" };
    if (isText !== undefined) return { value: text };
    const value = numberFrom(text, OHMS.includes(field.name));
    if (Number.isNaN(value)) return { value: null, wrong: `“${text}” is not a number` };
    if (value < Number(low) || value > Number(high)) {
      const said = Number.isFinite(value) ? numberText(value) : `“${text}”`; // more digits than a number holds
      return { value: null, wrong: `${said} is outside ${numberText(Number(low))} to ${numberText(Number(high))}` };
    }
    return { value };
  }

  const isPlain = (field) => field.name && field.type !== "checkbox";

  /* Every field's value by its name, and the complaints; a field that plays no part is not looked at. */
  function filled(form) {
    const values = { qualification: [] }, complaints = [];
    for (const field of form.elements) {
      if (field.name === "qualification" && field.checked) values.qualification.push(field.value);
      if (!isPlain(field)) continue;
      if (field.tagName === "SELECT") values[field.name] = field.value;
      else {
        const { value, wrong } = field.disabled ? { value: null } : read(field);
        values[field.name] = value;
        field.setAttribute("aria-invalid", Boolean(wrong));
        if (wrong) complaints.push(`${labelOf(field)}: ${wrong}.`);
      }
    }
    const broken = (names, wrong) => {
      for (const name of names) form.elements[name].setAttribute("aria-invalid", "true");
      complaints.push(wrong);
    };
    const { range_from_c: from, range_to_c: to, ambient_from_c: cold, ambient_to_c: hot, bits } = values;
    if (from !== null && to !== null && from >= to) broken(["range_from_c", "range_to_c"], "The range does not rise.");
    if ((cold === null) !== (hot === null) || (cold !== null && cold >= hot)) {
      broken(["ambient_from_c", "ambient_to_c"], "The electronics’ range must rise, or be left empty.");
    }
    if (bits !== null && !Number.isInteger(bits)) broken(["bits"], "bits: a whole number is needed.");
    return { values, complaints };
  }

  function setUse(form) {
    const { elements: { reference, method, parallel_ohm: parallel } } = form;
    const inUse = (names, isUsed) => { for (const name of names) form.elements[name].disabled = !isUsed; };
    inUse(["reference_v", "reference_tolerance_pct"], reference.value === "own");
    inUse(["step_k"], method.value === "table");
    inUse(["parallel_tolerance_pct"], parallel.value.trim() !== "");
  }

  function placeFrom(values) {
    const isOwn = values.reference === "own";
    return {
      thermistor: values.thermistor,
      rangeC: [values.range_from_c, values.range_to_c],
      ambientC: values.ambient_from_c === null ? null : [values.ambient_from_c, values.ambient_to_c],
      supplyV: values.supply_v,
      supplyTolerancePct: values.supply_tolerance_pct,
      fixedTolerancePct: values.fixed_tolerance_pct,
      fixedTempcoPpmPerK: values.fixed_tempco_ppm_per_k,
      parallelOhm: values.parallel_ohm,
      parallelTolerancePct: values.parallel_tolerance_pct,
      wireOhm: values.wire_ohm,
      referenceV: isOwn ? values.reference_v : null,
      referenceTolerancePct: isOwn ? values.reference_tolerance_pct : null,
      bits: values.bits,
      fullScale: 2 ** values.bits - (values.full_scale ? 1 : 0),
      offsetLsb: values.offset_lsb,
      gainPct: values.gain_pct,
      nonlinearityLsb: values.nonlinearity_lsb,
      leakageNa: values.leakage_na,
      stepK: values.method === "table" ? values.step_k : null,
      series: values.series,
    };
  }

  /* ---- Parts ---- */

  const slug = (number) => number.toLowerCase().replace(/[^a-z0-9.]+/g, "-").replace(/^[-.]+|[-.]+$/g, "") || "x";
  const plain = (text) => text.normalize("NFKC").toLowerCase();

  function partsFrom(list, { rows, qualifications, only_for: onlyFor }) {
    return list.rows.map(([number, own, maker, rated, tolerance, , , body, range, standing, lifecycle, , file], i) => {
      const [text, extended, dissipation, maxPower, timeConstant, qualification, places, withdrawn, lacking = [], covered = []] = rows[i];
      const [makerName, folder] = list.makers[maker], [, , ohm, at] = list.rated[rated];
      const [form, size] = list.bodies[body], [pct, pctText] = list.tolerances[tolerance];
      const said = [pct === null ? ohm : `${ohm} ${pctText}`, at, `${form} ${size}`.trim(), list.standings[standing]];
      return {
        number, form, size, text, withdrawn, lacking, covered,
        maker: makerName,
        about: `${makerName}, ${said.filter(Boolean).join(", ")}`,
        found: plain([number, number.replace(/[^\p{L}\p{N}]/gu, ""), own, makerName, ohm, form, size].join(" ")),
        address: `parts/${folder}/${file ?? `${slug(number)}.html`}`,
        operatingC: list.ranges[range][0] === null ? null : list.ranges[range].slice(0, 2),
        standing: list.standings[standing],
        lifecycle: list.lifecycles[lifecycle],
        isExtended: extended === 1,
        dissipationMwPerK: dissipation,
        maxPowerMw: maxPower,
        timeConstantS: timeConstant,
        qualification: qualifications[qualification],
        onlyFor: onlyFor[places],
        order: pct ?? Infinity, // which parts to rank first, until it is known better
        best: { fixedOhm: NaN },
      };
    });
  }

  /* ---- What a position asks of a part by its record, as decisions/requirements.py words it ---- */

  const sameText = (a, b) => a.toLowerCase() === b.toLowerCase();
  const isGrade = (text) => /^aec-q200 grade [0-4]$/.test(text);

  /* A grade of AEC-Q200 holds the range of the next ones. */
  function covers(stated, asked) {
    const [has, wanted] = [stated.toLowerCase(), asked.toLowerCase()];
    return has === wanted || (isGrade(has) && isGrade(wanted) && has < wanted);
  }

  function* against(part, values) {
    const { size_code: footprint, range_from_c: low, range_to_c: high, time_constant_max_s: slowest } = values;
    const bodyText = [part.form, part.size].filter(Boolean).join(" ");
    if (footprint && part.size !== footprint) yield `${part.size || bodyText} does not stand on the footprint ${footprint}`;
    if (part.operatingC) {
      const [coldest, hottest] = part.operatingC;
      if (low < coldest) yield `operates from ${degrees(coldest)}, the range reaches ${degrees(low)}`;
      if (high > hottest) yield `operates to ${degrees(hottest)}, the range reaches ${degrees(high)}`;
    }
    for (const asked of values.qualification) {
      if (part.qualification.some((stated) => covers(stated, asked))) continue;
      yield `${asked} is required, it has ${part.qualification.join(", ") || "none"}`;
    }
    if (slowest !== null && part.timeConstantS > slowest) {
      yield `time constant ${numberText(part.timeConstantS)} s, at most ${numberText(slowest)} s is required`;
    }
    if (part.withdrawn) yield `the part is withdrawn since ${part.withdrawn}`;
    const isHere = (name) => sameText(name, values.position) || sameText(name, values.board);
    if (part.onlyFor.length && !part.onlyFor.some(isHere)) yield `the part may be fitted only at ${part.onlyFor.join(", ")}`;
    if (part.lifecycle === "obsolete") yield "the part is obsolete";
    yield* wishes(part, values);
  }

  /* What only this page asks for. */
  function* wishes(part, { form, standing, lifecycle }) {
    if (form && part.form !== form) yield `its body is ${part.form}, ${form} is asked for`;
    if (standing && !["approved", "restricted", "withdrawn"].includes(part.standing)) {
      yield part.standing === "no standing" ? "the part has no entry in its ledger" : `the part is ${part.standing}`;
    }
    if (lifecycle && !["active", "obsolete"].includes(part.lifecycle)) yield `the part is ${part.lifecycle}`;
  }

  /* Figures that the form leaves empty, as circuit/gaps.py names them; whether one of them decides of every part, and
     whether one does of parts that are warmed by much. */
  function gapsOf(values) {
    const isOwn = values.reference === "own";
    const fields = [
      ["fixed_tolerance_pct", "circuit.fixed.tolerance_pct"],
      ["fixed_tempco_ppm_per_k", "circuit.fixed.tempco_ppm_per_k"],
      ...(values.parallel_ohm === null ? [] : [["parallel_tolerance_pct", "circuit.parallel.tolerance_pct"]]),
      ["supply_tolerance_pct", "circuit.supply_tolerance_pct"],
      ...(isOwn ? [["reference_tolerance_pct", "reference.tolerance_pct"]] : []),
      ["leakage_na", "adc.leakage_na"],
      ["offset_lsb", "adc.offset_lsb"],
      ["gain_pct", "adc.gain_pct"],
      ["nonlinearity_lsb", "adc.nonlinearity_lsb"],
    ].filter(([name]) => values[name] === null);
    const onlyWarms = ([name]) => !isOwn && name === "supply_tolerance_pct";
    return {
      fields: fields.map(([, field]) => field),
      decide: fields.some((one) => !onlyWarms(one)),
      decideWhereWarm: fields.some(onlyWarms),
    };
  }

  /* As circuit/power.py words it. */
  function overloadText({ maxPowerMw }, { fixedOhm, overload: { powerMw, atC } }) {
    return `with its best resistor, ${ohmText(fixedOhm)}, it takes up to ${comparedText(powerMw, maxPowerMw, 3)} mW `
      + `at ${degrees(atC)}, at most ${numberText(maxPowerMw)} mW is allowed`;
  }

  function verdict(part, { worstK, warmestK }, values, gaps, tC) {
    const covers = (t) => part.covered.some(([low, high]) => t >= low && t <= high);
    const ofPart = part.lacking.length && !tC.every(covers) ? [...part.lacking] : [];
    if (part.dissipationMwPerK === null) ofPart.push("limits.dissipation_mw_per_k");
    const asked = [
      ...(part.operatingC ? [] : ["limits.operating_c"]),
      ...(values.time_constant_max_s !== null && part.timeConstantS === null ? ["limits.time_constant_s"] : []),
    ];
    const within = worstK <= values.limit_k;
    // Self-heating reads high: without it a reading too low is not proven.
    const warms = gaps.decideWhereWarm && warmestK > WARMTH_COUNTS * values.limit_k;
    const lacks = ofPart.length + asked.length > 0 || warms;
    const isOpen = within ? gaps.decide || lacks : part.dissipationMwPerK === null;
    const meets = isOpen ? null : within;
    return { meets, missing: [...gaps.fields, ...ofPart, ...asked], isIncomplete: isOpen && lacks };
  }

  /* ---- Ranking, in slices that leave the page free ---- */

  class Ranking {
    constructor(parts, values, { progress, done }) {
      Object.assign(this, { values, progress, done, gaps: gapsOf(values), ranked: [], out: [] });
      this.chain = beadroll.chain(placeFrom(values));
      this.circuit = JSON.stringify(placeFrom(values)); // what a part's best resistor hangs on
      this.waiting = [];
      for (const part of parts) {
        const because = [...against(part, values)];
        if (because.length) this.out.push({ part, because });
        else this.waiting.push(part);
      }
      this.total = this.waiting.length;
      this.waiting.sort((a, b) => b.order - a.order); // taken from the end
      this.drawn = performance.now();
      this.work(FIRST_SLICE_MS);
    }

    stop() { clearTimeout(this.timer); }

    work(forMs) {
      const until = performance.now() + forMs;
      while (this.waiting.length && performance.now() < until) this.judge(this.waiting.pop());
      if (!this.waiting.length) return this.done(this);
      if (forMs === FIRST_SLICE_MS || performance.now() - this.drawn > DRAW_EVERY_MS) {
        this.progress(this);
        this.drawn = performance.now();
      }
      this.timer = setTimeout(() => this.work(SLICE_MS));
    }

    judge(part) {
      const { values, chain } = this;
      if (part.circuit !== this.circuit) this.rank(part);
      const { fixedOhm, worstK, atC, unread, overload } = part.best;
      if (unread) return this.out.push({ part, because: [unread] });
      if (overload) return this.out.push({ part, because: [overloadText(part, part.best)] });
      const found = { part, fixedOhm, worstK, atC, marginK: values.limit_k - worstK };
      return this.ranked.push({ ...found, ...verdict(part, part.best, values, this.gaps, chain.tC) });
    }

    /* The best resistor of the circuit before is where to look first. */
    rank(part) {
      const curve = beadroll.unpackedCurve(part.text, part.isExtended), { dissipationMwPerK, maxPowerMw } = part;
      const best = this.chain.best({ curve, dissipationMwPerK, maxPowerMw }, part.best.fixedOhm);
      part.circuit = this.circuit;
      part.best = Number.isNaN(best.worstK) ? { fixedOhm: NaN, unread: this.unread(curve) } : best;
      if (best.worstK >= 0) part.order = best.worstK;
    }

    unread(curve) {
      const { rangeC, series } = this.chain.place, over = rangeText(rangeC);
      const reaches = curve && rangeC.every((tC) => Number.isFinite(curve.resistance(tC, 1)));
      return reaches ? `with no resistor of ${series} every board has a reading over ${over}` : `the curve does not reach over ${over}`;
    }

    sorted() {
      const { ranked } = this;
      ranked.sort((a, b) => a.isIncomplete - b.isIncomplete || a.worstK - b.worstK);
      ranked.forEach((one, i) => { one.place = i + 1; });
      return ranked;
    }
  }

  /* ---- The record as YAML; JSON's texts are YAML's too ---- */

  const yamlPairs = (pairs) => Object.entries(pairs)
    .filter(([, value]) => value !== null && value !== undefined)
    .map(([key, value]) => `${key}: ${typeof value === "string" ? JSON.stringify(value) : value}`);
  const yamlMap = (pairs) => `{${yamlPairs(pairs).join(", ")}}`;
  const yamlList = (values) => `[${values.map((value) => JSON.stringify(value)).join(", ")}]`;

  function yaml(values, { part, fixedOhm }) {
    const requires = [
      ...(values.qualification.length ? [`qualification: ${yamlList(values.qualification)}`] : []),
      ...yamlPairs({ size_code: values.size_code || null, time_constant_max_s: values.time_constant_max_s }),
    ];
    const isOwn = values.reference === "own", bits = Math.min(values.bits, MOST_BITS);
    const fixed = {
      resistance_ohm: fixedOhm, tolerance_pct: values.fixed_tolerance_pct, tempco_ppm_per_k: values.fixed_tempco_ppm_per_k,
    };
    const parallel = { resistance_ohm: values.parallel_ohm, tolerance_pct: values.parallel_tolerance_pct };
    return [
      ...yamlPairs({ position: values.position, board: values.board, purpose: values.purpose }),
      `range_c: [${values.range_from_c}, ${values.range_to_c}]`,
      `limit_k: ${values.limit_k}`,
      ...(values.ambient_from_c === null ? [] : [`ambient_c: [${values.ambient_from_c}, ${values.ambient_to_c}]`]),
      "circuit:",
      `  thermistor: ${values.thermistor}`,
      `  fixed: ${yamlMap(fixed)}`,
      ...(values.parallel_ohm === null ? [] : [`  parallel: ${yamlMap(parallel)}`]),
      ...yamlPairs({
        wire_ohm: values.wire_ohm, supply_v: values.supply_v, supply_tolerance_pct: values.supply_tolerance_pct,
      }).map((line) => `  ${line}`),
      `reference: ${isOwn ? yamlMap({ volts: values.reference_v, tolerance_pct: values.reference_tolerance_pct }) : "ratiometric"}`,
      `adc: ${yamlMap({
        bits, full_scale: 2 ** bits - (values.full_scale ? 1 : 0), offset_lsb: values.offset_lsb, gain_pct: values.gain_pct,
        nonlinearity_lsb: values.nonlinearity_lsb, leakage_na: values.leakage_na,
      })}`,
      values.method === "table" ? `firmware: {method: table, step_k: ${values.step_k}}` : "firmware: {method: curve}",
      ...(requires.length ? [`requires: {${requires.join(", ")}}`] : []),
      `fitted: ${JSON.stringify(part.number)}`,
    ].map((line) => `${line}\n`).join("");
  }

  /* ---- CSV, with the names of the command's ---- */

  const MEETS = new Map([[true, "yes"], [false, "no"], [null, "undecided"]]);
  const CSV_NAMES = ["part", "fixed_ohm", "worst_k", "margin_k", "meets_limit", "missing", "because"];

  const csv = (ranked, out) => beadroll.csv(CSV_NAMES, [
    ...ranked.map((one) => [
      one.part.number, one.fixedOhm, one.worstK, one.marginK, MEETS.get(one.meets), one.missing.join("; "), "",
    ]),
    ...out.map(({ part, because }) => [part.number, "", "", "", "", "", because.join("; ")]),
  ]);

  /* ---- The page ---- */

  function element(name, attributes = {}, ...content) {
    const made = document.createElement(name);
    for (const [key, value] of Object.entries(attributes)) made.setAttribute(key, value);
    made.append(...content);
    return made;
  }

  const cell = (name, ...content) => element("td", { role: "cell", class: `bd-s-${name}` }, ...content);
  const partCell = (part) => element(
    "th", { scope: "row", role: "rowheader", class: "bd-s-number" }, element("a", { href: part.address }, part.number),
  );

  function limitCell({ meets, missing }) {
    const word = { true: "met", false: "missed", null: "undecided" }[meets];
    const marked = element("b", { class: `bd-short-${word}` }, word);
    return cell("verdict", marked, ...(missing.length ? [` not stated: ${missing.join(", ")}`] : []));
  }

  function rankedRow(one, taken) {
    const { part } = one;
    const radio = element("input", { type: "radio", name: "take", value: part.number, "aria-label": `Take ${part.number} for the record` });
    radio.checked = part.number === taken;
    return element(
      "tr", { role: "row" }, cell("place", String(one.place)), partCell(part), cell("about", part.about),
      cell("fixed", ohmText(one.fixedOhm)), cell("worst", `${one.worstK.toFixed(3)} at ${degrees(one.atC).replace(" ", "\u00a0")}`),
      cell("margin", signed(one.marginK)), limitCell(one), cell("take", element("label", {}, radio, " take")),
    );
  }

  const outRow = ({ part, because }) => element(
    "tr", { role: "row", title: because.join("; ") }, partCell(part), cell("about", part.about), cell("because", because.join("; ")),
  );

  function circuitText(values) {
    const pct = (value, unit = "%") => (value === null ? "tolerance not stated" : `±${numberText(value)} ${unit}`);
    const reference = values.reference === "own"
      ? `reference ${numberText(values.reference_v)} V ${pct(values.reference_tolerance_pct)}` : "ratiometric";
    const firmware = values.method === "table" ? `table every ${numberText(values.step_k)} K` : "inverse of the curve";
    return [
      `Thermistor on the ${values.thermistor} of ${numberText(values.supply_v)} V ${pct(values.supply_tolerance_pct)}`,
      `fixed resistor from ${values.series} ${pct(values.fixed_tolerance_pct)}`,
      ...(values.parallel_ohm === null ? [] : [`${ohmText(values.parallel_ohm)} across the thermistor`]),
      `${reference}, ${numberText(values.bits)} bits`, firmware,
      `${rangeText([values.range_from_c, values.range_to_c])} within ±${numberText(values.limit_k)} K`,
    ].join("; ");
  }

  function start(root, list, data) {
    const parts = partsFrom(list, data), starts = new Map(data.starts.map((one) => [one.position, one]));
    const find = (selector) => root.querySelector(selector);
    const form = find("form"), said = find(".bd-short-said"), search = find("[name=find]");
    const needReady = root.querySelectorAll("[data-does=record], [data-does=csv]");
    const state = { take: null, values: null, ranking: null, lastField: null };
    const taken = () => state.ranked?.find((one) => one.part.number === state.take) ?? state.ranked?.[0];
    const ranked = new beadroll.VisibleRows(find(".bd-short-ranked"), (one) => rankedRow(one, taken()?.part.number), "bd-short-long");
    const out = new beadroll.VisibleRows(find(".bd-short-out"), outRow, "bd-short-long");

    const say = (...sentences) => { said.textContent = sentences.filter(Boolean).join(" "); };

    const wanted = (entries) => {
      const words = plain(search.value).split(/\s+/).filter(Boolean);
      return words.length ? entries.filter(({ part }) => words.every((word) => part.found.includes(word))) : entries;
    };

    function draw(most) {
      const hits = wanted(state.ranked ?? []);
      ranked.show(hits, most);
      out.show(wanted(state.out ?? []), most);
      find(".bd-short-none").hidden = hits.length > 0 || root.ariaBusy === "true";
    }

    function take(ranking, isDone) {
      Object.assign(state, { ranked: ranking.sorted(), out: ranking.out });
      root.ariaBusy = String(!isDone);
      find(".bd-short-busy").textContent = isDone ? "" : `Ranked ${ranking.ranked.length} of ${ranking.total} so far.`;
      for (const button of needReady) button.disabled = !isDone || !ranking.ranked.length;
      draw();
      if (isDone) say(result(ranking), otherMethod());
    }

    function result({ ranked: all, out: gone }) {
      const met = all.filter(({ meets }) => meets).length, open = all.filter(({ meets }) => meets === null).length;
      const undecided = open ? `, ${open} undecided` : "";
      return `${met} of ${count(parts.length, "part")} within ±${numberText(state.values.limit_k)} K${undecided}; `
        + `${all.length} ranked, ${gone.length} out.`;
    }

    function otherMethod() {
      const { value } = form.elements.start, method = starts.get(value)?.other_method;
      return method ? `The firmware at ${value} is by ${method}: “beadroll shortlist ${value}” ranks with that.` : "";
    }

    function refresh() {
      state.ranking?.stop();
      setUse(form);
      const { values, complaints } = filled(form);
      if (complaints.length) {
        for (const button of needReady) button.disabled = true;
        root.ariaBusy = "false";
        find(".bd-short-busy").textContent = "";
        return say(...complaints, state.ranked ? "The lists are those of before." : "");
      }
      state.values = values;
      find(".bd-short-circuit").textContent = `${circuitText(values)}.`;
      state.ranking = new Ranking(parts, values, { progress: (r) => take(r, false), done: (r) => take(r, true) });
      return undefined;
    }

    /* ---- Address and history: one step back for one field, not for one letter ---- */

    const firstValue = (field) => (field.tagName === "SELECT" ? field.options[0].value : field.defaultValue);

    function address() {
      const params = new URLSearchParams();
      for (const field of form.elements) {
        if (field.type === "checkbox" ? field.checked : field.name && field.value !== firstValue(field)) {
          params.append(field.name, field.value);
        }
      }
      if (search.value.trim()) params.set("find", search.value);
      if (state.take) params.set("take", state.take);
      return `${location.href.split("#")[0]}#${params}`;
    }

    function remember(changedField) {
      history[changedField === state.lastField ? "replaceState" : "pushState"](null, "", address());
      state.lastField = changedField;
    }

    function fill(valueOf) {
      for (const field of form.elements) {
        if (field.type === "checkbox") field.checked = valueOf(field, true).includes(field.value);
        else if (field.name) field.value = valueOf(field, false);
        if (field.tagName === "SELECT" && field.selectedIndex < 0) field.selectedIndex = 0;
      }
    }

    function restore() {
      const params = new URLSearchParams(location.hash.slice(1));
      fill((field, isTick) => (isTick ? params.getAll(field.name) : params.get(field.name) ?? firstValue(field)));
      // A link may say no more than where to start from.
      if ([...params.keys()].every((key) => !form.elements[key] || key === "start")) startFrom(params.get("start"));
      search.value = params.get("find") ?? "";
      state.take = params.get("take");
      state.lastField = null;
      refresh();
    }

    /* A position fills in all that it states; what only this page asks for is as at first. */
    function startFrom(name) {
      const from = starts.get(name);
      if (!from) return;
      fill((field, isTick) => (isTick ? from[field.name] : field.name === "start" ? name : from[field.name] ?? firstValue(field)));
      // What it has no use for stays as a start for whoever wants it.
      for (const unused of ["reference_v", "reference_tolerance_pct", "step_k"]) {
        const field = form.elements[unused];
        if (!field.value && (from.reference === "ratiometric") === unused.startsWith("reference")) field.value = field.defaultValue;
      }
    }

    const does = {
      async link() {
        await beadroll.copied(address());
        say("Link copied.");
      },
      async record() {
        await beadroll.copied(yaml(state.values, taken()));
        say(`The record of ${state.values.position} with ${taken().part.number} and ${ohmText(taken().fixedOhm)} copied, as YAML.`);
      },
      csv() {
        beadroll.saved("shortlist.csv", new Blob(["\ufeff", csv(state.ranked, state.out)], { type: "text/csv" }));
      },
      print: () => print(),
      reset() {
        history.pushState(null, "", location.href.split("#")[0]);
        restore();
        form.elements.start.focus();
      },
    };

    form.addEventListener("submit", (event) => event.preventDefault());
    form.addEventListener("input", ({ target }) => {
      if (target.name === "start") startFrom(target.value);
      refresh();
      remember(target.name);
    });
    form.addEventListener("change", () => { state.lastField = null; });
    search.addEventListener("input", () => {
      draw();
      remember("find");
    });
    root.addEventListener("change", ({ target }) => {
      if (target.name !== "take") return;
      state.take = target.value;
      remember("take");
    });
    root.addEventListener("click", (event) => does[event.target.closest("button")?.dataset.does]?.());
    addEventListener("popstate", () => {
      if (!/^#[^=]+$/.test(location.hash)) restore(); // else it is an anchor of the page
    });
    addEventListener("beforeprint", () => draw(Infinity));
    addEventListener("afterprint", () => draw());

    root.hidden = false;
    find("details").open = matchMedia("(min-width: 60em)").matches;
    restore();
  }

  document.addEventListener("DOMContentLoaded", () => {
    const root = document.getElementById("bd-short");
    if (!root) return;
    const needs = document.getElementById("bd-short-needs");
    if (!beadroll.parts || !beadroll.shortlist) return needs.replaceChildren("The list of parts could not be loaded.");
    needs.remove();
    start(root, beadroll.parts, beadroll.shortlist);
  });
})();
