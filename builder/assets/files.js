/* What leaves a page: text to the clipboard, files to the disk, rows as CSV.

   beadroll.copied(text)         a promise that the text is in the clipboard
   beadroll.saved(name, blob)    saves a file
   beadroll.csv(names, rows)     CSV with a line of names; safe to open in a spreadsheet */
window.beadroll = window.beadroll || {};
(() => {
  const KEPT_MS = 1000; // long enough for a browser to take the file

  beadroll.copied = async (text) => {
    try {
      await navigator.clipboard.writeText(text);
    } catch {
      /* A page of a plain http host has no clipboard of its own. */
      const held = document.createElement("textarea");
      held.value = text;
      document.body.append(held);
      held.select();
      document.execCommand("copy");
      held.remove();
    }
  };

  beadroll.saved = (name, blob) => {
    const link = document.createElement("a");
    link.href = URL.createObjectURL(blob);
    link.download = name;
    link.click();
    setTimeout(() => URL.revokeObjectURL(link.href), KEPT_MS);
  };

  function cell(value) {
    if (typeof value === "number") return Number.isFinite(value) ? String(Number(value.toPrecision(10))) : "";
    /* A spreadsheet takes text that begins so for a formula. */
    const text = /^[=+\-@\t\r]/.test(value) ? `'${value}` : value;
    return /[",\n\r]/.test(text) ? `"${text.replaceAll('"', '""')}"` : text;
  }

  beadroll.csv = (names, rows) => [names, ...rows].map((row) => `${row.map(cell).join(",")}\n`).join("");
})();
