/* Curves in the browser, from the samples that the builder makes: R(T), T(R), the band, and what one part reads for
   another. No law of a thermistor stands here; exports/curve_script.py says what a sample holds.

   beadroll.loadCurve(key)       a promise of the part's Curve; its script is loaded once, when it is first asked for
   beadroll.compared(a, b, tC)   part b read as if it were a, at whole degrees
   beadroll.wholeDegrees(from, to) */
window.beadroll = window.beadroll || {};
(() => {
  const ZERO_C = -273.15;
  const LN_LARGEST = 700; // e to more than that, or less than minus that, is beyond a number
  const ROUNDING_K = 1e-6;
  const MOST_STEPS = 100;

  /* A quantum, then from each value to the next how many of them. */
  function values([quantum, ...steps]) {
    let total = 0;
    return Float64Array.from(steps, (step) => (total += step) * quantum);
  }

  /* The last place whose point is not above the value, and never the last point itself. */
  function place(points, value) {
    let low = 0, high = points.length - 1;
    while (high - low > 1) {
      const middle = (low + high) >> 1;
      if (points[middle] <= value) low = middle;
      else high = middle;
    }
    return low;
  }

  const clamped = (value, low, high) => Math.min(Math.max(value, low), high);

  class Curve {
    constructor(key, data) {
      this.key = key;
      this.basis = data.basis;
      this.spanC = data.span_c;
      this.operatingC = data.operating_c;
      this.extends = data.extends;
      this.facts = data.facts;
      this.x = values(data.t_c).reverse().map((tC) => 1 / (tC - ZERO_C));
      this.y = values(data.ln_r).reverse();
      this.slope = values(data.slope_k).reverse();
      this.bandLow = values(data.band.low);
      this.bandHigh = values(data.band.high);
      this.bandC = [data.band.from_c, data.band.from_c + this.bandLow.length - 1];
      this.incomplete = data.band.incomplete;
    }

    /* Ω; not a number where the curve does not reach. */
    resistance(tC) {
      return this.extends || !this.extrapolated(tC) ? this.extendedResistance(tC) : NaN;
    }

    /* Ω; beyond the span along the end's slope, even where the curve is not to be extrapolated. */
    extendedResistance(tC) {
      if (!(tC > ZERO_C)) return NaN;
      const { x, y, slope } = this, end = x.length - 1, at = 1 / (tC - ZERO_C);
      const inside = clamped(at, x[0], x[end]);
      const i = place(x, inside), piece = this.piece(i), dx = inside - x[i];
      let lnR = y[i] + dx * (slope[i] + dx * (piece.bend + dx * piece.twist));
      if (at !== inside) lnR += (at - inside) * slope[at < inside ? 0 : end];
      return Math.abs(lnR) < LN_LARGEST ? Math.exp(lnR) : NaN;
    }

    /* °C; beyond the span along the end's slope, even where the curve is not to be extrapolated. */
    extendedTemperature(rOhm) {
      if (!(rOhm > 0)) return NaN;
      const { x, y, slope } = this, end = x.length - 1, lnR = Math.log(rOhm);
      const inside = clamped(lnR, y[0], y[end]);
      let at = this.inverse(inside);
      if (lnR !== inside) at += (lnR - inside) / slope[lnR < inside ? 0 : end];
      return at > 0 ? 1 / at + ZERO_C : NaN;
    }

    /* True outside the span, and where there is no temperature. */
    extrapolated(tC) {
      return !(tC >= this.spanC[0] - ROUNDING_K && tC <= this.spanC[1] + ROUNDING_K);
    }

    /* Minimum and maximum resistance at a whole degree; not a number outside bandC, the span and operating range. */
    edges(tC) {
      const i = tC - this.bandC[0], nominal = this.resistance(tC);
      return [nominal * Math.exp(this.bandLow[i]), nominal * Math.exp(this.bandHigh[i])];
    }

    isIncomplete(tC) {
      return this.incomplete.some(([from, to]) => tC >= from && tC <= to);
    }

    piece(i) {
      const { x, y, slope } = this, width = x[i + 1] - x[i], chord = (y[i + 1] - y[i]) / width;
      return {
        width,
        bend: (3 * chord - 2 * slope[i] - slope[i + 1]) / width,
        twist: (slope[i] + slope[i + 1] - 2 * chord) / width ** 2,
      };
    }

    /* 1/T at which ln R is reached within the points: Newton's method, halving where it leaves the bounds. */
    inverse(lnR) {
      const i = place(this.y, lnR), { width, bend, twist } = this.piece(i), slope = this.slope[i];
      const rise = lnR - this.y[i];
      let low = 0, high = width, dx = width * rise / (this.y[i + 1] - this.y[i]);
      for (let step = 0; step < MOST_STEPS; step += 1) {
        const miss = dx * (slope + dx * (bend + dx * twist)) - rise;
        if (miss > 0) high = dx;
        else low = dx;
        const next = dx - miss / (slope + dx * (2 * bend + 3 * dx * twist));
        const taken = next >= low && next <= high ? next : (low + high) / 2;
        if (!(Math.abs(taken - dx) > 1e-13 * width)) break;
        dx = taken;
      }
      return this.x[i] + dx;
    }
  }

  /* ---- Loading: a page from file:// cannot fetch data, a script it can ---- */

  const here = new URL("../parts/", document.currentScript.src);
  const loading = new Map();
  const arrived = new Map();

  beadroll.curve = (key, data) => arrived.set(key, new Curve(key, data));

  beadroll.loadCurve = (key) => {
    if (!loading.has(key)) {
      loading.set(key, new Promise((resolve, reject) => {
        const script = document.createElement("script");
        script.src = new URL(`${key}.js`, here).href;
        script.onload = () => (arrived.has(key) ? resolve(arrived.get(key)) : script.onerror());
        script.onerror = () => {
          loading.delete(key); // asked for again, it is loaded again
          reject(new Error(`${key}.js`));
        };
        document.head.append(script);
      }));
    }
    return loading.get(key);
  };

  /* ---- Comparing ---- */

  beadroll.wholeDegrees = (from, to) => Array.from({ length: Math.max(0, to - from + 1) }, (_, i) => from + i);

  /* reads is T_reference(R_other(T)) − T: positive where the instrument shows too much. The band is the other part's
     at its highest and lowest resistance, the own band the reference's. */
  beadroll.compared = (reference, other, tC) => {
    const shown = (rOhm, t, known) => (known ? reference.extendedTemperature(rOhm) - t : NaN);
    const rows = tC.map((t) => {
      const rRef = reference.resistance(t), r = other.resistance(t);
      const known = Number.isFinite(rRef + r);
      const [low, high] = other.edges(t), [refLow, refHigh] = reference.edges(t);
      const reads = shown(r, t, known);
      return {
        tC: t, rRef, r, reads, low, high, refLow, refHigh,
        ratioPct: (r / rRef - 1) * 100,
        readsMin: shown(high, t, known),
        readsMax: shown(low, t, known),
        otherFar: other.extrapolated(t),
        referenceFar: reference.extrapolated(t),
        readsFar: reference.extrapolated(t) || reference.extrapolated(t + reads),
      };
    });
    return { reference, other, rows };
  };

  beadroll.Curve = Curve;
})();
