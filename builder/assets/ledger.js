/* The Ledger page: filters held in the address, and only the rows that were scrolled to. */
(() => {
  const BATCH = 200; // rows drawn at once; more as the end of the table comes near
  const PLACES = [1, 2, 7]; // columns that name a part or a position, only for among them

  const TESTS = {
    find: (text) => {
      const words = text.toLowerCase().split(/\s+/).filter(Boolean);
      return (entry) => words.every((word) => entry.found.includes(word));
    },
    about: (kind) => ({ row }) => row.dataset.about === kind,
    state: (state) => ({ row }) => row.dataset.state === state,
    by: (name) => ({ row }) => row.dataset.by === name,
    from: (day) => ({ row }) => row.dataset.day >= day,
    to: (day) => ({ row }) => row.dataset.day <= day,
    review: (kind) => ({ row }) => (kind === "open" ? "review" in row.dataset : row.dataset.review === kind),
    holds: () => ({ row }) => "holds" in row.dataset,
  };

  function start(root) {
    const form = root.querySelector("form"), body = root.querySelector("tbody");
    const status = form.querySelector("[role=status]");
    const end = root.appendChild(document.createElement("div"));
    const entries = [...body.rows].map((row) => ({
      row,
      found: [...PLACES.map((i) => row.cells[i].textContent), row.dataset.own ?? ""].join(" ").toLowerCase(),
    }));
    let hits = entries, drawn = 0;

    function drawTo(count) {
      body.append(...hits.slice(drawn, count).map(({ row }) => row));
      drawn = Math.min(hits.length, Math.max(drawn, count));
    }

    function filled() {
      const params = new URLSearchParams();
      for (const [name, value] of new FormData(form)) if (value.trim()) params.append(name, value);
      return params;
    }

    function refresh() {
      const tests = [...filled()].map(([name, value]) => TESTS[name](value));
      hits = entries.filter((entry) => tests.every((test) => test(entry)));
      body.replaceChildren();
      drawn = 0;
      drawTo(BATCH);
      status.textContent = `${hits.length} of ${entries.length} entries`;
    }

    /* An address names either one entry or the filters. */
    function restore() {
      const hash = location.hash.slice(1);
      const params = new URLSearchParams(hash.includes("=") ? hash : "");
      for (const field of form.elements) {
        if (field.type === "checkbox") field.checked = params.has(field.name);
        else if (field.name) field.value = params.get(field.name) ?? "";
      }
      refresh();
      const place = hash ? hits.findIndex(({ row }) => row.id === decodeURIComponent(hash)) : -1;
      if (place < 0) return;
      drawTo(place + BATCH);
      /* Only a link that is followed makes a target of a row that was not drawn. */
      location.replace(`#${hash}`);
      hits[place].row.scrollIntoView();
    }

    function changed() {
      refresh();
      history.replaceState(null, "", `${location.href.split("#")[0]}#${filled()}`);
    }

    form.addEventListener("submit", (event) => event.preventDefault());
    form.addEventListener("input", changed);
    form.querySelector("button").addEventListener("click", () => {
      for (const field of form.elements) {
        if (field.type === "checkbox") field.checked = false;
        else if (field.name) field.value = "";
      }
      changed();
    });
    new IntersectionObserver((seen) => {
      if (seen.some((one) => one.isIntersecting)) drawTo(drawn + BATCH);
    }, { rootMargin: "1500px" }).observe(end);
    addEventListener("beforeprint", () => drawTo(hits.length));
    addEventListener("hashchange", () => {
      if (location.hash.includes("=") || !root.querySelector(":target")) restore();
    });
    form.hidden = false;
    restore();
  }

  const root = document.getElementById("bd-ledger");
  if (root) start(root);
})();
