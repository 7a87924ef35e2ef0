/* Axis scales: value <-> scale coordinate t <-> fraction of the axis.
   The same three scales as in scales.py; a value that a scale cannot show becomes NaN, and NaN is never drawn. */

const SCALES = {
  linear: () => ({ forward: (value) => value, inverse: (t) => t }),
  log: () => ({ forward: (value) => (value > 0 ? Math.log10(value) : NaN), inverse: (t) => 10 ** t }),
  symlog: (width) => ({
    forward: (value) => Math.asinh(value / (2 * width)) / Math.LN10,
    inverse: (t) => 2 * width * Math.sinh(t * Math.LN10),
  }),
};

const NARROWEST = 1e-12;

class Scale {
  constructor(structure) {
    Object.assign(this, { label: "", unit: "", ticks: null, width: 1, note: {} }, structure);
    this.view = null;
    this.setMoment({ home: [0, 1], width: null, ticks: null });
  }

  /** The home range of a frame; a range that is not finite or empty is replaced, so that ticks always end. */
  setMoment({ home, width, ticks }) {
    this.width = width > 0 ? width : 1;
    this.ticks = ticks;
    Object.assign(this, SCALES[this.scale](this.width));
    this.home = this.acceptable(...home) ? home : [0, 1];
  }

  /** Whether doubles hold and resolve a range; an axis that reached further would have ticks at infinity. */
  acceptable(start, end) {
    const far = Math.max(Math.abs(start), Math.abs(end)),
      values = [this.inverse(start), this.inverse(end)];
    const held =
      values.every((value) => Math.abs(value) < 8.5e307) && (this.scale !== "log" || values.every((v) => v > 1e-307));
    return held && Math.abs(end - start) > NARROWEST * far;
  }

  get start() {
    return (this.view || this.home)[0];
  }
  get end() {
    return (this.view || this.home)[1];
  }
  get low() {
    return Math.min(this.start, this.end);
  }
  get high() {
    return Math.max(this.start, this.end);
  }

  fraction(t) {
    return (t - this.start) / (this.end - this.start);
  }
  coordinate(fraction) {
    return this.start + fraction * (this.end - this.start);
  }
  place(value) {
    return value === null ? NaN : this.fraction(this.forward(value));
  }
  value(fraction) {
    return this.inverse(this.coordinate(fraction));
  }

  /** Shows the part between two fractions of the present view, if doubles resolve it. */
  zoomTo(from, to) {
    const range = [this.coordinate(from), this.coordinate(to)];
    if (this.acceptable(...range)) this.view = range;
  }

  zoomAbout(fraction, factor) {
    this.zoomTo(fraction - fraction * factor, fraction + (1 - fraction) * factor);
  }

  /** "label (10⁵⁴ unit; linear within ±10⁵²)", with what the tick labels leave out. */
  title() {
    const { exponent = 0, offset = 0 } = this.note;
    const power = exponent ? (this.unit ? "" : "×") + powerText(exponent) : "";
    const shift = offset ? ` ${offset > 0 ? "−" : "+"} ${formatNumber(Math.abs(offset), 15)}` : "";
    const linear = this.scale === "symlog" ? `linear within ±${formatNumber(this.width, 2)}` : "";
    const inside = [[power, this.unit].filter(Boolean).join(" "), linear].filter(Boolean).join("; ");
    return this.label + shift + (inside ? ` (${inside})` : "");
  }
}
