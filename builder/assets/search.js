/* Material's search, for engineers and without a server. */
(() => {
  /* "10 kΩ" is one word here; the search would look for every 10 and every kΩ. */
  function joined(query) {
    return query.normalize("NFKC").replace(/(\d)\s+(?=[kM]?Ω|[kM]\b)/gi, "$1");
  }

  /* A fragment such as 3F38 is looked for inside words too; without a weight, so that what begins with it comes first. */
  function insideWords(query) {
    return query.replace(/(?<!\S)(?=[a-z]*\d)[a-z\d]{3,}(?!\S)/gi, "$& *$&*^0");
  }

  /* Material says of every word that no found word begins with that it is missing. */
  function markFound({ title, text, terms }) {
    const words = `${title} ${text}`.replace(/<\/?mark>/g, "").toLowerCase();
    for (const term of Object.keys(terms)) terms[term] ||= words.includes(term);
  }

  /* What the worker's script expects to find around it and a window does not have, or has with another meaning. */
  function makeWorkerScope(scope, worker) {
    scope.postMessage = (data) => worker.dispatchEvent(new MessageEvent("message", { data }));
    scope.importScripts = async (...urls) => {
      for (const url of urls) await loadScript(scope.document, url);
    };
    return scope;
  }

  function loadScript(page, url) {
    return new Promise((resolve, reject) => {
      const script = page.createElement("script");
      Object.assign(script, { src: url, onload: resolve, onerror: reject });
      page.head.append(script);
    });
  }

  /* A browser refuses to start a worker from file://, so there its script runs in a hidden frame. */
  class FrameWorker extends EventTarget {
    constructor(url) {
      super();
      const script = document.createElement("script");
      script.src = new URL(url, document.baseURI).href;
      const frame = document.createElement("iframe");
      frame.hidden = true;
      frame.title = "search";
      frame.srcdoc = script.outerHTML;
      this.scope = new Promise((resolve) => {
        frame.onload = () => resolve(makeWorkerScope(frame.contentWindow, this));
      });
      document.body.append(frame);
    }

    postMessage(data) {
      this.scope.then((scope) => scope.dispatchEvent(new MessageEvent("message", { data })));
    }
  }

  /* Material's search box is a dialog without a name. */
  addEventListener("DOMContentLoaded", () => document.querySelector(".md-search")?.setAttribute("aria-label", "Search"));

  const fromFile = location.protocol === "file:";

  /* Material sends its worker {type: 2, data: query}, and is sent {type: 3, data: {items: pages of entries}}. */
  window.Worker = class extends (fromFile ? FrameWorker : Worker) {
    constructor(url) {
      super(url);
      this.addEventListener("message", ({ data: { type, data } }) => {
        if (type === 3) data.items.flat().forEach(markFound);
      });
    }

    postMessage(message) {
      super.postMessage(message.type === 2 ? { ...message, data: insideWords(joined(message.data)) } : message);
    }
  };

  /* By this name Material's script knows that it runs in a frame, and where its language files are. */
  if (fromFile) window.IFrameWorker = window.Worker;
})();
