/* A position's worst case and its best fixed resistor in the browser, as builder/circuit and builder/decisions compute
   them; exports/packed_curves.py says how a curve arrives.

   beadroll.unpackedCurve(text, extends)            a part's curve, or null where it has none
   beadroll.chain(place)                            a position: what of it is the same for every part
   chain.best(part, guessOhm)                       { fixedOhm, worstK, atC, warmestK, overload } of a part
                                                    { curve, dissipationMwPerK, maxPowerMw }; warmestK: how far its body
                                                    is warmed; overload: { powerMw, atC }, or null where that is allowed

   Two corners of the limits are enough, where Python tries all: each source pushes the reading one way. Only the supply
   may push both ways (it warms the sensor and weighs the leakage), and where a sensor is warmed by much, the resistors. */
window.beadroll = window.beadroll || {};
(() => {
  const ZERO_C = -273.15;
  const LN_QUANTUM = 2e-6, EDGE_QUANTUM = 3e-5, T_QUANTUM_K = 0.001;
  const STEPS_K = [1000, 10, 2.5, 1, 0.5];
  const JUST_BEHIND_K = 1e-7;
  const NEAR_K = 1e-6; // a span's end is still within it
  const ARRIVED_K = 1e-4, INVERTED_K = 1e-3; // the last step of Newton's method; it is then nearer by its square
  const NEWTON_STEPS = 12, BISECTIONS = 40;
  const CLOSE_K = 0.5; // the worst case is looked for at these steps, as in circuit/budget.py
  const REFERENCE_C = 25; // where a resistor has its stated value
  const QUANTISATION_LSB = 0.5;
  const BEYOND = 10; // how far beyond the thermistor's resistances the series is tried, as in decisions/resistors.py
  const STRIDES = [24, 8, 3, 1];
  // How much worse how many values must be for the search to end: a table's whole codes make errors uneven.
  const WORSE = { curve: { ratio: 1.03, byK: 0.005, times: 4 }, table: { ratio: 2, byK: 0.1, times: 24 } };
  const MOST_FIRST = 5;
  const SPARSE = 3, HIGH_RATIO = 0.9, HIGH_K = 0.02; // 1.5 K falls into step with few tables
  const UNEVEN_STEP_K = 4; // in finer tables an error is uneven from one half degree to the next
  const LITTLE_K = 0.4, COUNTS_K = 0.0005;
  const WARM_K = 4; // from where on the resistors' tolerances may push a reading both ways

  /* ---- Curves ---- */

  const ALPHABET = Array.from({ length: 93 }, (_, i) => String.fromCharCode(33 + i)).filter((c) => !"\"&<\\".includes(c));
  const BASE = 44, SMALL = 4, PAIRS = 2 * SMALL + 1;
  const DIGITS = new Uint8Array(128);
  ALPHABET.slice(0, 2 * BASE).forEach((character, digit) => { DIGITS[character.charCodeAt(0)] = digit; });

  class Reader {
    constructor(text) {
      this.text = text;
      this.at = 0;
    }

    get ended() { return this.at >= this.text.length; }

    integer() {
      let value = 0, scale = 1, digit;
      do {
        digit = DIGITS[this.text.charCodeAt(this.at++)];
        value += (digit % BASE) * scale;
        scale *= BASE;
      } while (digit >= BASE);
      return value % 2 ? -(value - 1) / 2 : value / 2;
    }

    /* So many integers, two small ones in a character. */
    * pairs(count) {
      for (let given = 0; given < count; given += 1) {
        const pair = DIGITS[this.text.charCodeAt(this.at++)];
        if (pair >= PAIRS * PAIRS) yield this.integer();
        else {
          yield Math.floor(pair / PAIRS) - SMALL;
          given += 1;
          if (given < count) yield (pair % PAIRS) - SMALL;
        }
      }
    }

    /* ln R, told as third differences. */
    nominal(count) {
      const values = new Float64Array(count);
      let first = 0, second = 0, third = 0;
      for (let i = 0; i < count; i += 1) {
        third += this.integer();
        second += third;
        first += second;
        values[i] = first * LN_QUANTUM;
      }
      return values;
    }

    /* How far an edge is from it, told as second differences. */
    edge(count) {
      const values = new Float64Array(count);
      let first = 0, second = 0, i = 0;
      for (const step of this.pairs(count)) {
        second += step;
        first += second;
        values[i++] = first * EDGE_QUANTUM;
      }
      return values;
    }
  }

  /* Both ends and the whole steps between, rising; the same as Python's. */
  function wholeSteps(low, high, step) {
    const steps = [low];
    const last = Math.floor(high / step + 1e-9);
    for (let k = Math.ceil(low / step - 1e-9); k <= last; k += 1) {
      const t = Math.round(k * step * 1e9) / 1e9;
      if (t > low && t < high) steps.push(t);
    }
    if (high > low) steps.push(high);
    return steps;
  }

  /* Slopes of the parabolas through three points each. */
  function slopes(x, y) {
    const n = x.length, made = new Float64Array(n);
    let width = x[1] - x[0], chord = (y[1] - y[0]) / width;
    if (n === 2) return made.fill(chord);
    for (let i = 1; i < n - 1; i += 1) {
      const nextWidth = x[i + 1] - x[i], nextChord = (y[i + 1] - y[i]) / nextWidth;
      made[i] = (nextWidth * chord + width * nextChord) / (width + nextWidth);
      if (i === 1) made[0] = 2 * chord - made[1];
      width = nextWidth;
      chord = nextChord;
    }
    made[n - 1] = 2 * chord - made[n - 2];
    return made;
  }

  /* A function by its points at whole steps and at both ends of a piece. */
  class Points {
    constructor(beginC, endC, stepK) {
      const tC = wholeSteps(beginC, endC, stepK);
      this.stepK = stepK;
      this.firstStep = Math.floor(beginC / stepK + 1e-9);
      this.x = Float64Array.from(tC, (t) => 1 / (t - ZERO_C));
    }

    hold(y) {
      this.y = y;
      this.slope = slopes(this.x, y);
      return this;
    }

    /* The value; the slope is left in `slopeK`. */
    at(tC) {
      const { x, y, slope } = this;
      let i = Math.floor(tC / this.stepK) - this.firstStep;
      i = i < 0 ? 0 : i > x.length - 2 ? x.length - 2 : i;
      const width = x[i + 1] - x[i], dx = 1 / (tC - ZERO_C) - x[i], chord = (y[i + 1] - y[i]) / width;
      const bend = (3 * chord - 2 * slope[i] - slope[i + 1]) / width;
      const twist = (slope[i] + slope[i + 1] - 2 * chord) / (width * width);
      this.slopeK = slope[i] + dx * (2 * bend + dx * 3 * twist);
      return y[i] + dx * (slope[i] + dx * (bend + dx * twist));
    }
  }

  class Piece {
    constructor(reader, beginC) {
      const end = reader.integer();
      this.endC = Math.floor(end / 2) * T_QUANTUM_K;
      this.behindC = end % 2 ? this.endC + JUST_BEHIND_K : this.endC; // from here on the next piece holds
      const points = [0, 1, 2].map(() => new Points(beginC, this.endC, STEPS_K[reader.integer()]));
      this.nominal = points[0].hold(reader.nominal(points[0].x.length));
      this.edges = points.slice(1).map((one) => one.hold(reader.edge(one.x.length)));
    }
  }

  class PackedCurve {
    constructor(text, isExtended) {
      const reader = new Reader(text);
      let beginC = reader.integer() * T_QUANTUM_K;
      this.lowC = isExtended ? -Infinity : beginC - NEAR_K;
      this.pieces = [];
      while (!reader.ended) {
        this.pieces.push(new Piece(reader, beginC));
        beginC = this.pieces.at(-1).endC;
      }
      this.highC = isExtended ? Infinity : beginC + NEAR_K;
      this.slopeK = 0; // d ln R / d(1/T) where ln R was asked for last
    }

    piece(tC) {
      const { pieces } = this, last = pieces.length - 1;
      let p = 0;
      while (p < last && tC >= pieces[p].behindC) p += 1;
      return pieces[p];
    }

    /* How far it is to the next step or corner. */
    roomK(tC) { return this.piece(tC).behindC - tC; }

    /* ln R at its lowest (0), nominal (1) or highest (2), in Ω. */
    lnR(tC, edge) {
      const { nominal, edges } = this.piece(tC), lnR = nominal.at(tC);
      this.slopeK = nominal.slopeK;
      if (edge === 1) return lnR;
      const beside = edges[edge >> 1], off = beside.at(tC);
      this.slopeK += beside.slopeK;
      return lnR + off;
    }

    isKnown(tC) { return tC >= this.lowC && tC <= this.highC; }

    resistance(tC, edge) { return this.isKnown(tC) ? Math.exp(this.lnR(tC, edge)) : NaN; }

    /* °C that belongs to a resistance, looked for from a temperature near it. */
    temperature(rOhm, nearC) {
      const lnR = Math.log(rOhm);
      let tC = nearC;
      for (let step = 0; step < NEWTON_STEPS; step += 1) {
        const miss = this.lnR(tC, 1) - lnR, xPerK = 1 / (tC - ZERO_C) - miss / this.slopeK;
        if (!(xPerK > 0)) return NaN;
        const next = 1 / xPerK + ZERO_C;
        if (Math.abs(next - tC) < INVERTED_K) return this.isKnown(next) ? next : NaN;
        tC = next;
      }
      return NaN;
    }
  }

  beadroll.unpackedCurve = (text, isExtended) => (text ? new PackedCurve(text, isExtended) : null);

  /* ---- Series of resistors (IEC 60063) ---- */

  const E24 = [10, 11, 12, 13, 15, 16, 18, 20, 22, 24, 27, 30, 33, 36, 39, 43, 47, 51, 56, 62, 68, 75, 82, 91];
  const SERIES = {
    E24: E24.map((value) => value * 10),
    E96: Array.from({ length: 96 }, (_, i) => Math.round(100 * 10 ** (i / 96))),
  };

  /* The values of a series from one resistance to another, rising. */
  function seriesOhm(name, lowOhm, highOhm) {
    const made = [];
    for (let decade = Math.floor(Math.log10(lowOhm)) - 2; 10 ** (decade + 2) <= highOhm; decade += 1) {
      for (const value of SERIES[name]) {
        const ohm = decade < 0 ? value / 10 ** -decade : value * 10 ** decade;
        if (ohm >= lowOhm * (1 - 1e-9) && ohm <= highOhm * (1 + 1e-9)) made.push(ohm);
      }
    }
    return made;
  }

  /* ---- The circuit as built: the divider, what warms the thermistor, the converter ---- */

  const TIMES = [-1, 1];
  const farther = (way, a, b) => (way > 0 ? Math.max(a, b) : Math.min(a, b));
  const share = (pct) => (pct ?? 0) / 100;

  /* Limits of a position, as circuit/sources.py has them; a figure that is not stated is nothing here. */
  function limitsOf(place) {
    const ambientC = place.ambientC ?? place.rangeC;
    const farthestK = Math.max(...ambientC.map((tC) => Math.abs(tC - REFERENCE_C)));
    return {
      fixed: share(place.fixedTolerancePct),
      drift: (place.fixedTempcoPpmPerK ?? 0) * 1e-6 * farthestK,
      parallel: share(place.parallelTolerancePct),
      supply: share(place.supplyTolerancePct),
      reference: share(place.referenceTolerancePct),
      leakageA: (place.leakageNa ?? 0) * 1e-9,
      gain: share(place.gainPct),
      errorLsb: (place.offsetLsb ?? 0) + (place.nonlinearityLsb ?? 0) + QUANTISATION_LSB,
    };
  }

  class Chain {
    constructor(place) {
      this.place = place;
      this.limits = limitsOf(place);
      this.isHigh = place.thermistor === "high side";
      this.isRatiometric = place.referenceV === null;
      this.referenceV = place.referenceV ?? place.supplyV;
      this.parallelOhm = place.parallelOhm ?? Infinity;
      this.wireOhm = place.wireOhm ?? 0;
      this.fullScale = place.fullScale ?? 2 ** place.bits;
      this.topCode = 2 ** place.bits - 1;
      this.tC = wholeSteps(...place.rangeC, CLOSE_K);
      this.rowC = this.tableRows();
      // A thermistor on the high side raises the code as it warms.
      this.codeSign = this.isHigh ? 1 : -1;
    }

    /* Where the firmware's table has its rows; null for the inverse of the curve. */
    tableRows() {
      const { rangeC: [low, high], stepK } = this.place;
      if (stepK === null) return null;
      const count = Math.ceil((high - low) / stepK - 1e-9);
      return [...Array.from({ length: count }, (_, k) => Math.round((low + k * stepK) * 1e9) / 1e9), high];
    }

    /* The best of the series for a part; the guess is where to look first. No number where none has a reading. */
    best(part, guessOhm) {
      const [coldC, hotC] = this.place.rangeC;
      const coldOhm = part.curve?.resistance(coldC, 1), hotOhm = part.curve?.resistance(hotC, 1);
      if (!(coldOhm + hotOhm > 0)) return { fixedOhm: NaN, worstK: NaN, atC: NaN };
      const ohms = seriesOhm(this.place.series, hotOhm / BEYOND, coldOhm * BEYOND);
      return new Search(this, part, ohms).best(guessOhm);
    }
  }

  beadroll.chain = (place) => new Chain(place);

  /* One part in the chain with one fixed resistor after the other. */
  class Board {
    constructor(chain, part) {
      const count = chain.tC.length, columns = () => [0, 1, 2].map(() => new Float64Array(count));
      this.chain = chain;
      this.curve = part.curve;
      this.maxPowerMw = part.maxPowerMw ?? Infinity;
      this.kPerW = part.dissipationMwPerK === null ? 0 : 1e3 / part.dissipationMwPerK;
      this.rOhm = columns(); // at the true temperatures: lowest, nominal, highest
      this.perK = columns(); // −d ln R/dT there
      this.littleK = new Float64Array(count); // as far as that slope is to be followed
      this.isKnown = new Uint8Array(count);
      this.rowOhm = chain.rowC?.map((tC) => Math.exp(part.curve.lnR(tC, 1)));
      this.rowCode = chain.rowC && new Float64Array(chain.rowC.length);
      this.rowFit = chain.rowC && new Int32Array(chain.rowC.length); // which resistor a row's code is for
      this.fits = 0;
    }

    /* The curve at the j-th temperature. A body that is warmed lies behind a step of its band, however little. */
    know(j) {
      const tC = this.chain.tC[j] + (this.kPerW ? 2 * JUST_BEHIND_K : 0);
      for (const edge of [0, 1, 2]) {
        this.rOhm[edge][j] = this.curve.resistance(tC, edge);
        this.perK[edge][j] = this.curve.slopeK / (tC - ZERO_C) ** 2;
      }
      this.littleK[j] = Math.min(LITTLE_K, this.curve.roomK(tC));
      this.isKnown[j] = 1;
    }

    /* Takes another fixed resistor, for which the firmware is made too. */
    fit(fixedOhm) {
      this.fixedOhm = fixedOhm;
      this.fits += 1;
      this.set(0, 0, 0, 0);
      this.plainOpenV = this.openV;
      this.plainSeenOhm = this.seenOhm;
    }

    /* The code of the table's k-th row: of the nominal circuit, whole. */
    codeOf(k) {
      if (this.rowFit[k] !== this.fits) {
        const { chain } = this, perOhm = 1 / (this.rowOhm[k] + chain.wireOhm) + 1 / chain.parallelOhm;
        const branch = 1 / (1 + this.fixedOhm * perOhm), ofSupply = chain.isHigh ? 1 - branch : branch;
        const code = ofSupply * chain.place.supplyV / chain.referenceV * chain.fullScale;
        this.rowCode[k] = Math.floor(Math.min(Math.max(code, 0), chain.topCode) + 0.5);
        this.rowFit[k] = this.fits;
      }
      return this.rowCode[k];
    }

    /* The divider with its sources at a share −1 to 1 of their limits. */
    set(fixed, parallel, supply, leakage) {
      const { chain } = this, { limits } = chain;
      this.rf = this.fixedOhm * (1 + fixed * limits.fixed) * (1 + fixed * limits.drift);
      this.rp = chain.parallelOhm * (1 + parallel * limits.parallel);
      this.supplyV = chain.place.supplyV * (1 + supply * limits.supply);
      this.leakageA = leakage * limits.leakageA;
      const resistorsOhm = 1 / (1 / this.rf + 1 / this.rp);
      this.openV = (this.supplyV / this.rf + (chain.isHigh ? -this.leakageA : this.leakageA)) * resistorsOhm;
      this.seenOhm = resistorsOhm + chain.wireOhm;
    }

    junctionV(rOhm) {
      const perOhm = 1 / (rOhm + this.chain.wireOhm) + 1 / this.rp;
      const branch = 1 / (1 + this.rf * perOhm);
      return this.supplyV * (this.chain.isHigh ? 1 - branch : branch) + this.leakageA * this.rf * branch;
    }

    powerW(rOhm) { return this.openV * this.openV * rOhm / ((rOhm + this.seenOhm) * (rOhm + this.seenOhm)); }

    warmingK(rOhm) { return this.powerW(rOhm) * this.kPerW; }

    /* The largest power in the part on any board, and where; null where no more than is allowed. */
    overload() {
      let found = { powerMw: this.maxPowerMw, atC: null };
      for (const fixed of TIMES) {
        for (const parallel of TIMES) {
          for (const supply of TIMES) {
            for (const leakage of TIMES) {
              this.set(fixed, parallel, supply, leakage);
              found = this.largerPower(found);
            }
          }
        }
      }
      return found.atC === null ? null : found;
    }

    /* Of the resistance that it sees a part takes the most: mostly that is allowed, and no temperature is looked at. */
    largerPower(found) {
      let larger = found;
      if (!(this.powerW(this.seenOhm) * 1e3 > found.powerMw)) return larger;
      this.chain.tC.forEach((tC, j) => {
        if (!this.isKnown[j]) this.know(j);
        for (const edge of [0, 2]) {
          const powerMw = this.powerW(this.bodyOhm(j, edge)) * 1e3;
          if (powerMw > larger.powerMw) larger = { powerMw, atC: tC };
        }
      });
      return larger;
    }

    /* Resistance of the body, warmed by its own power; by little, along the curve's slope. */
    bodyOhm(j, edge) {
      const rOhm = this.rOhm[edge][j];
      if (this.kPerW === 0) return rOhm;
      const perK = this.perK[edge][j], warmingK = this.warmingK(rOhm), slope = this.balance(rOhm, warmingK, perK);
      const firstK = warmingK / slope;
      if (!(firstK >= 0 && firstK < this.littleK[j])) return this.hotOhm(this.chain.tC[j], edge);
      const tK = this.chain.tC[j] - ZERO_C, firstOhm = rOhm * Math.exp(-perK * firstK * tK / (tK + firstK));
      return firstOhm * (1 + perK * (firstK - this.warmingK(firstOhm)) / slope);
    }

    /* How far the body of the nominal board is warmed. */
    nominalWarmingK(j) {
      if (!this.isKnown[j]) this.know(j);
      this.set(0, 0, 0, 0);
      return this.warmingK(this.bodyOhm(j, 1));
    }

    /* d(body − T − warming)/d(body) */
    balance(rOhm, warmingK, perK) {
      return 1 + warmingK * (this.seenOhm - rOhm) / (this.seenOhm + rOhm) * perK;
    }

    /* By Newton's method from the true temperature up, bisected where that does not arrive. */
    hotOhm(tC, edge) {
      const { curve } = this, hottestC = tC + this.warmingK(this.seenOhm);
      let bodyC = tC;
      for (let step = 0; step < NEWTON_STEPS; step += 1) {
        const rOhm = curve.resistance(bodyC, edge), warmingK = this.warmingK(rOhm);
        const slope = this.balance(rOhm, warmingK, curve.slopeK / (bodyC - ZERO_C) ** 2);
        const stepK = (bodyC - tC - warmingK) / slope;
        if (!(Math.abs(stepK) > ARRIVED_K)) return rOhm;
        bodyC = Math.min(Math.max(bodyC - stepK, tC), hottestC);
      }
      return this.bisectedOhm(tC, hottestC, edge);
    }

    bisectedOhm(tC, hottestC, edge) {
      let lowC = tC, highC = hottestC;
      for (let step = 0; step < BISECTIONS; step += 1) {
        const middleC = (lowC + highC) / 2;
        if (middleC - tC < this.warmingK(this.curve.resistance(middleC, edge))) lowC = middleC;
        else highC = middleC;
      }
      return this.curve.resistance((lowC + highC) / 2, edge);
    }

    /* The code of the board that reads highest (way 1) or lowest (way −1); not a number where it is at an end. */
    extremeCode(j, way, nominalOhm, warmingK) {
      const { chain } = this, toCode = way * chain.codeSign;
      const supply = this.supplySide(j, way, nominalOhm, warmingK);
      let code;
      if (warmingK > WARM_K) code = this.warmCode(j, way, toCode);
      else if (supply) code = this.code(j, way, way, -way, supply);
      else code = farther(toCode, this.code(j, way, way, -way, 1), this.code(j, way, way, -way, -1));
      return code > 0 && code < chain.topCode ? code : NaN;
    }

    warmCode(j, way, toCode) {
      let code = -toCode * Infinity;
      for (const fixed of TIMES) {
        for (const parallel of TIMES) {
          for (const supply of TIMES) code = farther(toCode, code, this.code(j, way, fixed, parallel, supply));
        }
      }
      return code;
    }

    /* The code of one board; the thermistor and the converter push the reading one way. */
    code(j, way, fixed, parallel, supply) {
      const { chain } = this, { limits } = chain, toCode = way * chain.codeSign;
      this.set(fixed, parallel, supply, toCode);
      const referenceV = chain.isRatiometric ? this.supplyV : chain.referenceV * (1 - toCode * limits.reference);
      const share = this.junctionV(this.bodyOhm(j, way > 0 ? 0 : 2)) / referenceV;
      return share * chain.fullScale * (1 + toCode * limits.gain) + toCode * limits.errorLsb;
    }

    /* Where the supply stands: 1, −1, or 0 where either may be. Of a ratiometric reading a low one weighs the leakage more
       and warms the sensor less: both lower the lowest reading, but of the highest one it is this against that. */
    supplySide(j, way, nominalOhm, warmingK) {
      const { chain, fixedOhm } = this, { supply, leakageA } = chain.limits;
      if (!chain.isRatiometric) return way * chain.codeSign;
      if (way < 0) return -1;
      const leakageK = leakageA * (nominalOhm + fixedOhm) / chain.place.supplyV / this.perK[1][j];
      if (supply * Math.min(2 * warmingK, leakageK) > COUNTS_K) return 0;
      return 2 * warmingK > leakageK ? 1 : -1;
    }

    /* How far off the worst board is; infinite where some board has no reading. */
    worstK(j) {
      if (!this.isKnown[j]) this.know(j);
      const tC = this.chain.tC[j], nominalOhm = this.rOhm[1][j];
      const warmingK = this.plainOpenV ** 2 * nominalOhm / (nominalOhm + this.plainSeenOhm) ** 2 * this.kPerW;
      const highK = this.readingC(this.extremeCode(j, 1, nominalOhm, warmingK), tC) - tC;
      const lowK = tC - this.readingC(this.extremeCode(j, -1, nominalOhm, warmingK), tC);
      const largestK = Math.max(highK, lowK);
      return Number.isNaN(largestK) ? Infinity : largestK;
    }

    readingC(code, nearC) {
      return this.rowCode ? this.tabulatedC(code, nearC) : this.computedC(code, nearC);
    }

    /* Straight lines between the table's rows, and beyond them along the last; rows of one code: from the last of them. */
    tabulatedC(code, nearC) {
      const { chain: { rowC, codeSign, place } } = this, last = rowC.length - 2;
      let k = Math.min(Math.max(Math.floor((nearC - rowC[0]) / place.stepK), 0), last);
      if (codeSign > 0) {
        while (k > 0 && code < this.codeOf(k)) k -= 1;
        while (k < last && code >= this.codeOf(k + 1)) k += 1;
      } else {
        while (k < last && code < this.codeOf(k + 1)) k += 1;
        while (k > 0 && code >= this.codeOf(k)) k -= 1;
      }
      const from = this.codeOf(k), width = this.codeOf(k + 1) - from;
      return width === 0 ? NaN : rowC[k] + (code - from) / width * (rowC[k + 1] - rowC[k]);
    }

    computedC(code, nearC) {
      const { chain } = this, ofSupply = code / chain.fullScale * chain.referenceV / chain.place.supplyV;
      const branch = chain.isHigh ? 1 - ofSupply : ofSupply;
      const rOhm = 1 / ((1 / branch - 1) / this.fixedOhm - 1 / chain.parallelOhm) - chain.wireOhm;
      return rOhm > 0 && rOhm < Infinity ? this.curve.temperature(rOhm, nearC) : NaN;
    }
  }

  /* The value of a series with the smallest worst case. The worst case over some temperatures is never above the one
     over all of them: a value whose error is larger anywhere than the best one's is out. */
  class Search {
    constructor(chain, part, ohms) {
      this.board = new Board(chain, part);
      this.chain = chain;
      this.ohms = ohms;
      this.first = [0, chain.tC.length - 1]; // places that tell values apart soonest
      this.found = { fixedOhm: NaN, worstK: Infinity, atC: NaN };
      this.method = chain.rowC ? "table" : "curve";
      this.sparse = chain.place.stepK < UNEVEN_STEP_K && chain.rowC ? 1 : SPARSE;
    }

    best(guessOhm) {
      const start = this.start(guessOhm);
      this.tried(start);
      for (const way of TIMES) this.walk(start, way);
      const { found, board } = this;
      if (found.worstK === Infinity) return { fixedOhm: NaN, worstK: NaN, atC: NaN };
      board.fit(found.fixedOhm);
      const warmestK = Math.max(...this.chain.tC.map((_, j) => board.nominalWarmingK(j)));
      return { ...found, warmestK, overload: board.overload() };
    }

    /* A value that promises much: the guess or one of a few, and from there downhill. */
    start(guessOhm) {
      const { ohms } = this;
      let best = Math.max(ohms.findIndex((ohm) => ohm >= guessOhm), 0), least = this.promised(best, Infinity);
      const isBetter = (i) => {
        const promised = i >= 0 && i < ohms.length ? this.promised(i, least) : Infinity;
        if (promised < least) [best, least] = [i, promised];
        return best === i;
      };
      for (let i = 0; i < ohms.length; i += STRIDES[0]) isBetter(i);
      // Few values give every board a reading where the converter sees little of the range.
      for (let i = 0; i < ohms.length && least === Infinity; i += 1) isBetter(i);
      for (const stride of STRIDES) {
        for (const way of TIMES) while (isBetter(best + way * stride));
      }
      return best;
    }

    /* Outwards until nothing better comes: away from the best value an error grows, but for the rounding of a table's
       codes. */
    walk(start, way) {
      const { ratio, byK, times } = WORSE[this.method];
      let worse = 0;
      for (let i = start + way; worse < times && i >= 0 && i < this.ohms.length; i += way) {
        const { worstK } = this.found;
        worse = this.tried(i) > worstK * ratio + byK ? worse + 1 : 0;
      }
    }

    /* Takes a value if its worst case is the smallest so far; gives what it was seen to reach at least. */
    tried(i) {
      const promised = this.promised(i, this.found.worstK);
      if (promised >= this.found.worstK) return promised;
      const { j, worstK } = this.worst();
      if (worstK < this.found.worstK) this.found = { fixedOhm: this.ohms[i], worstK, atC: this.chain.tC[j] };
      if (!this.first.includes(j)) this.first = [j, ...this.first.slice(0, MOST_FIRST - 1)];
      return worstK;
    }

    /* Error at the places looked at first, given up where it passes a limit. */
    promised(i, limitK) {
      this.board.fit(this.ohms[i]);
      let largest = 0;
      for (const j of this.first) {
        largest = Math.max(largest, this.board.worstK(j));
        if (largest >= limitK) break;
      }
      return largest;
    }

    /* The worst case over all temperatures, given up where it passes the best: some of them first, all where it may be. */
    worst() {
      const { board, found, sparse } = this, last = this.chain.tC.length - 1, seen = [];
      let worst = { j: 0, worstK: 0 };
      const look = (j) => {
        const errorK = board.worstK(j);
        if (errorK > worst.worstK) worst = { j, worstK: errorK };
        return errorK;
      };
      for (let j = 0; j <= last && worst.worstK < found.worstK; j += sparse) seen.push(look(j));
      const high = seen.flatMap((errorK, k) => (errorK > worst.worstK * HIGH_RATIO - HIGH_K ? [k * sparse] : []));
      for (const place of high) {
        for (let j = Math.max(place - sparse + 1, 0); j < place + sparse && j <= last; j += 1) {
          if (worst.worstK >= found.worstK) return worst;
          if (j % sparse) look(j);
        }
      }
      look(last);
      return worst;
    }
  }
})();
