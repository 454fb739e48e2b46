/* A table's rows where there may be thousands: all that few are, else those in view between two spaces of the others'
   height.

   new beadroll.VisibleRows(table, row, longClass)    row(item, place) makes a tr; longClass marks a table with spaces
   rows.show(items)                                   rows.show(items, Infinity) draws all, for paper */
window.beadroll = window.beadroll || {};
(() => {
  const DRAWN_WHOLE = 300; // items that are simply all drawn
  const PAUSE_MS = 150; // after the last keystroke; only then the items below the window are drawn
  const BEYOND = 15; // rows drawn above and below the window, so that Tab always finds the next link

  beadroll.VisibleRows = class {
    constructor(table, row, longClass) {
      const body = (attribute, value) => {
        const made = table.appendChild(document.createElement("tbody"));
        made.setAttribute(attribute, value);
        return made;
      };
      Object.assign(this, { table, row, longClass, height: 30, items: [], most: DRAWN_WHOLE });
      this.above = body("aria-hidden", "true");
      this.body = body("role", "rowgroup");
      this.below = body("aria-hidden", "true");
      addEventListener("scroll", () => this.draw(), { passive: true });
      addEventListener("resize", () => this.draw());
    }

    show(items, most = DRAWN_WHOLE) {
      Object.assign(this, { items, most, drawn: null, paused: most === Infinity });
      this.table.setAttribute("aria-rowcount", items.length + 1);
      this.table.classList.toggle(this.longClass, items.length > most);
      this.draw();
      clearTimeout(this.timer);
      this.timer = setTimeout(() => {
        this.paused = true;
        this.draw();
      }, PAUSE_MS);
    }

    rows(first, last) {
      return this.items.slice(first, last).map((item, i) => {
        const made = this.row(item, first + i);
        made.setAttribute("aria-rowindex", first + i + 2); // the headings are row 1
        return made;
      });
    }

    inView() {
      const top = -this.above.getBoundingClientRect().top, count = this.items.length;
      const last = Math.min(count, Math.max(0, Math.ceil((top + innerHeight) / this.height)) + BEYOND);
      if (count <= this.most) return [0, this.paused ? count : last];
      return [Math.max(0, Math.min(last, Math.floor(top / this.height)) - BEYOND), last];
    }

    draw() {
      this.height = this.rowHeight();
      const [first, last] = this.inView();
      if (String(this.drawn) === String([first, last, this.height])) return;
      this.keep(first, last);
      this.space(this.above, first);
      this.space(this.below, this.items.length - last);
      this.drawn = [first, last, this.height];
    }

    /* Rows of one line differ by less than a pixel; following that would make the page creep. */
    rowHeight() {
      const count = this.body.rows.length;
      if (!count || this.items.length <= this.most) return this.height;
      const height = this.body.getBoundingClientRect().height / count;
      return Math.abs(height - this.height) < 0.5 ? this.height : height;
    }

    /* Rows that stay are not touched, so that the one with the focus keeps it. */
    keep(first, last) {
      const [from, to] = this.drawn ?? [0, 0];
      if (first >= to || last <= from) return this.body.replaceChildren(...this.rows(first, last));
      for (const [i, made] of [...this.body.rows].entries()) if (from + i < first || from + i >= last) made.remove();
      if (first < from) this.body.prepend(...this.rows(first, from));
      if (last > to) this.body.append(...this.rows(to, last));
    }

    space(body, count) {
      if (!count) return body.replaceChildren();
      const cell = body.rows[0]?.cells[0] ?? body.insertRow().insertCell();
      cell.colSpan = this.table.tHead.rows[0].cells.length;
      cell.style.height = `${count * this.height}px`;
    }
  };
})();
