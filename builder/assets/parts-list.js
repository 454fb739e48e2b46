/* The Parts page: filters, order, and the rows that are in view. */
(() => {
  const FACTORS = { R: 1, K: 1e3, M: 1e6 };
  const collator = new Intl.Collator("en", { numeric: true });

  /* ---- What is typed ---- */

  /* A resistance as people type it: 4k7, 4.7k, 4.7kΩ, 4700. Not a number where it is none. */
  function ohms(text) {
    const code = /^(\d*)([RrKkM])(\d*)(?:Ω|[Oo]hms?)?$/.exec(text);
    if (code && (code[1] || code[3])) return Number(`${code[1] || 0}.${code[3] || 0}`) * FACTORS[code[2].toUpperCase()];
    const plain = /^(\d+\.?\d*(?:e\d+)?|\.\d+)([kKM]?)(?:Ω|[Oo]hms?)?$/.exec(text);
    return plain ? Number(plain[1]) * FACTORS[plain[2].toUpperCase() || "R"] : NaN;
  }

  function celsius(text) {
    const found = /^([-−+]?)(\d+\.?\d*)(?:°?C)?$/.exec(text);
    return found ? Number(found[2]) * (found[1] === "-" || found[1] === "−" ? -1 : 1) : NaN;
  }

  function percent(word) {
    const found = /^±?(\d*\.?\d+)%$|^±(\d*\.?\d+)$/.exec(word);
    return found ? Number(found[1] ?? found[2]) : NaN;
  }

  /* Products of a factor and a decimal are not exact. */
  const same = (a, b) => Math.abs(a - b) <= 1e-9 * b;

  const plain = (text) => text.normalize("NFKC");

  function words(query) {
    const joined = plain(query).replace(/(\d)\s+(?=[kKM]?(?:Ω|[Oo]hm)|[kKM](?:\s|$)|%)/g, "$1");
    return joined.split(/\s+/).map((word) => word.replace(/^[,;]+|[,;]+$/g, "")).filter(Boolean);
  }

  /* ---- Parts ---- */

  const slug = (number) => number.toLowerCase().replace(/[^a-z0-9.]+/g, "-").replace(/^[-.]+|[-.]+$/g, "") || "x";

  const squeezed = (number) => number.replace(/[^\p{L}\p{N}]/gu, "");

  function partsFrom(data) {
    return data.rows.map(([number, own, maker, rated, tolerance, bK, mark, body, range, standing, lifecycle, said, file]) => {
      const [makerName, folder] = data.makers[maker];
      const [ohm, atC, ohmText, at] = data.rated[rated];
      const [form, size] = data.bodies[body];
      const state = data.standings[standing];
      const shown = [number, own, makerName, at, form, size, state, data.lifecycles[lifecycle], data.words[said]];
      return {
        maker: makerName, ohm, atC, form, size, bK, mark,
        standing: state,
        lifecycle: data.lifecycles[lifecycle],
        tolerancePct: data.tolerances[tolerance][0],
        range: data.ranges[range],
        address: `${folder}/${file ?? `${slug(number)}.html`}`,
        found: plain([...shown, squeezed(number), squeezed(own)].join(" ")).toLowerCase(),
        cells: {
          number, own, maker: makerName,
          rated: at ? `${ohmText} ${at}` : ohmText,
          tolerance: data.tolerances[tolerance][1],
          b: bK === null ? "–" : `${bK}${mark && ` ${mark}`}`,
          body: size ? `${form} ${size}` : form,
          range: data.ranges[range][2],
          standing: state,
          lifecycle: data.lifecycles[lifecycle],
        },
        /* The builder sorted all but the numbers: their places say the order. Null comes last either way. */
        order: {
          number, own: own || null, maker, rated, b: bK, body, standing, lifecycle,
          tolerance: data.tolerances[tolerance][0] === null ? null : tolerance,
          range: data.ranges[range][0] === null ? null : range,
        },
      };
    });
  }

  /* ---- Filters: each field that is filled in is one test ---- */

  function wordTest(word) {
    const piece = word.toLowerCase(), ohm = ohms(word), pct = percent(word);
    return (part) => part.found.includes(piece) || same(part.ohm, ohm) || part.tolerancePct === pct;
  }

  const TESTS = {
    rated: ([value]) => (part) => same(part.ohm, Number(value)),
    tolerance: ([value]) => (part) => part.tolerancePct !== null && part.tolerancePct <= Number(value),
    form: (values) => (part) => values.includes(part.form),
    size: ([value]) => (part) => part.size === value,
    standing: (values) => (part) => values.includes(part.standing),
    lifecycle: (values) => (part) => values.includes(part.lifecycle),
    maker: ([value]) => (part) => part.maker === value,
  };

  const LIMITS = {
    rated_from: [ohms, "a resistance: write 4k7 or 4700", (ohm) => (part) => part.ohm >= ohm * (1 - 1e-9)],
    rated_to: [ohms, "a resistance: write 4k7 or 4700", (ohm) => (part) => part.ohm <= ohm * (1 + 1e-9)],
    cold: [celsius, "a temperature: write −40", (tC) => (part) => part.range[0] !== null && part.range[0] <= tC],
    hot: [celsius, "a temperature: write 125", (tC) => (part) => part.range[1] !== null && part.range[1] >= tC],
  };

  function filled(form) {
    const params = new URLSearchParams();
    for (const [name, value] of new FormData(form)) if (value.trim()) params.append(name, value);
    return params;
  }

  /* The tests that the form asks for, and what in it cannot be read. */
  function asked(form, params) {
    const tests = words(params.get("find") ?? "").map(wordTest), complaints = [];
    for (const name of new Set(params.keys())) if (TESTS[name]) tests.push(TESTS[name](params.getAll(name)));
    for (const [name, [read, wanted, test]] of Object.entries(LIMITS)) {
      const text = plain(params.get(name) ?? "").replace(/\s/g, ""), value = read(text);
      const unreadable = text !== "" && Number.isNaN(value);
      form.elements[name].setAttribute("aria-invalid", unreadable);
      if (unreadable) complaints.push(`“${text}” is not ${wanted}.`);
      else if (text) tests.push(test(value));
    }
    return { tests, complaints };
  }

  /* ---- Order ---- */

  function sorted(parts, by, falling) {
    const value = (part) => part.order[by];
    const compare = by === "number" || by === "own"
      ? (a, b) => collator.compare(value(a), value(b))
      : (a, b) => value(a) - value(b);
    const known = parts.filter((part) => value(part) !== null).sort(compare);
    if (falling) known.reverse();
    return [...known, ...parts.filter((part) => value(part) === null)];
  }

  /* ---- CSV ---- */

  const CSV_NAMES = "part,own_number,maker,rated_resistance_ohm,rated_c,tolerance_pct,b_25_85_k,b_25_85_mark,"
    + "form,size_code,operating_min_c,operating_max_c,standing,lifecycle";

  function csvCell(value) {
    if (typeof value === "number") return String(value);
    /* A spreadsheet takes text that begins so for a formula. */
    const text = /^[=+\-@\t\r]/.test(value ?? "") ? `'${value}` : value ?? "";
    return /[",\n\r]/.test(text) ? `"${text.replaceAll('"', '""')}"` : text;
  }

  function csv(parts) {
    const lines = parts.map((part) => [
      part.cells.number, part.cells.own, part.maker, part.ohm, part.atC, part.tolerancePct, part.bK, part.mark,
      part.form, part.size, part.range[0], part.range[1], part.standing, part.lifecycle,
    ].map(csvCell).join(","));
    return `${[CSV_NAMES, ...lines].join("\n")}\n`;
  }

  /* ---- Rows ---- */

  function element(name, attributes = {}, ...content) {
    const made = document.createElement(name);
    for (const [key, value] of Object.entries(attributes)) made.setAttribute(key, value);
    made.append(...content);
    return made;
  }

  function emptyRow(columns) {
    const cells = columns.map((name) => name === "number"
      ? element("th", { scope: "row", role: "rowheader", class: "bd-c-number" }, element("a"))
      : element("td", { role: "cell", class: `bd-c-${name}` }, ...(name === "standing" ? [element("span")] : [])));
    return element("tr", { role: "row" }, ...cells);
  }

  function filledRow(made, part, columns) {
    columns.forEach((name, column) => {
      const cell = made.cells[column];
      (cell.firstElementChild ?? cell).textContent = part.cells[name];
    });
    made.querySelector("a").href = part.address;
    const state = part.standing === "no standing" ? "none" : part.standing;
    made.querySelector("span").className = `bd-standing bd-standing-${state}`;
    return made;
  }

  /* ---- Copy and save ---- */

  async function copied(text) {
    try {
      await navigator.clipboard.writeText(text);
    } catch {
      /* A page of a plain http host has no clipboard of its own. */
      const held = document.body.appendChild(element("textarea", {}, text));
      held.select();
      document.execCommand("copy");
      held.remove();
    }
  }

  function save(text) {
    const address = URL.createObjectURL(new Blob(["\ufeff", text], { type: "text/csv" }));
    element("a", { href: address, download: "parts.csv" }).click();
    setTimeout(() => URL.revokeObjectURL(address), 1000);
  }

  /* ---- The page ---- */

  function start(root, data) {
    const parts = partsFrom(data);
    const form = root.querySelector("form"), table = root.querySelector("table");
    const count = root.querySelector("[role=status]"), none = root.querySelector(".bd-parts-none");
    const columns = [...table.tHead.querySelectorAll("button")].map((button) => button.dataset.by);
    const empty = emptyRow(columns);
    const rows = new beadroll.VisibleRows(
      table, (part) => filledRow(empty.cloneNode(true), part, columns), "bd-parts-long",
    );
    const orders = new Map();
    let order = "maker", hits = [], lastField = null;

    function inOrder() {
      if (!orders.has(order)) orders.set(order, sorted(parts, order.replace("-", ""), order[0] === "-"));
      return orders.get(order);
    }

    function refresh() {
      const { tests, complaints } = asked(form, filled(form));
      hits = inOrder().filter((part) => tests.every((test) => test(part)));
      rows.show(hits);
      none.hidden = hits.length > 0;
      count.textContent = [`${hits.length} of ${parts.length} parts`, ...complaints].join(". ");
      for (const button of table.tHead.querySelectorAll("button")) {
        const direction = { [button.dataset.by]: "ascending", [`-${button.dataset.by}`]: "descending" }[order];
        button.parentElement.setAttribute("aria-sort", direction ?? "none");
      }
    }

    function address() {
      const params = filled(form);
      if (order !== "maker") params.set("order", order);
      return `${location.href.split("#")[0]}#${params}`;
    }

    /* One step back for one field, not for one letter. */
    function changed(field) {
      refresh();
      history[field === lastField ? "replaceState" : "pushState"](null, "", address());
      lastField = field;
    }

    function restore() {
      const params = new URLSearchParams(location.hash.slice(1));
      for (const field of form.elements) {
        if (field.type === "checkbox") field.checked = params.getAll(field.name).includes(field.value);
        else if (field.name) field.value = params.get(field.name) ?? "";
      }
      const by = params.get("order") ?? "maker";
      order = columns.includes(by.replace("-", "")) ? by : "maker";
      lastField = null;
      refresh();
    }

    const does = {
      async link() {
        await copied(address());
        count.textContent = "Link copied";
      },
      async copy() {
        await copied(csv(hits));
        count.textContent = `${hits.length} of ${parts.length} parts copied as CSV`;
      },
      download: () => save(csv(hits)),
      clear() {
        for (const field of form.elements) {
          if (field.type === "checkbox") field.checked = false;
          else field.value = "";
        }
        changed("clear");
        form.elements.find.focus();
      },
    };

    form.addEventListener("submit", (event) => event.preventDefault());
    form.addEventListener("input", (event) => changed(event.target));
    form.addEventListener("change", () => { lastField = null; });
    root.addEventListener("click", (event) => {
      const { does: deed, by } = event.target.closest("button")?.dataset ?? {};
      if (deed) does[deed]();
      if (by) {
        order = order === by ? `-${by}` : by;
        changed("order");
      }
    });
    addEventListener("popstate", () => {
      if (!/^#[^=]+$/.test(location.hash)) restore(); // else it is an anchor of the page
    });
    addEventListener("beforeprint", () => rows.show(hits, Infinity));
    addEventListener("afterprint", () => rows.show(hits));

    root.hidden = false;
    restore();
    const inMore = [...filled(form).keys()].some((name) => name !== "find");
    root.querySelector("details").open = inMore || matchMedia("(min-width: 48em)").matches;
  }

  document.addEventListener("DOMContentLoaded", () => {
    const root = document.getElementById("bd-parts");
    if (root && window.beadroll?.parts) start(root, window.beadroll.parts);
  });
})();
