/* Ticks: values, their texts, and what the axis title must add. Every loop here ends after a stated number of steps. */

const MOST_TICKS = 200;
const MOST_DECADES = 700;
const DECADE_STEPS = [1, 2, 3, 5, 10, 15, 20, 25, 30, 50, 100, 200];

const decadeStep = (span, count) => DECADE_STEPS.find((step) => span / step <= Math.max(count, 2) + 0.5) || 400;

const exponentOf = (size) => (size > 0 ? Math.floor(Math.log10(size) + 1e-12) : 0);

/** Digits after the point that show a step as it is. */
const decimals = (step) => Math.min(15, Math.max(0, Math.ceil(-Math.log10(step) - 1e-9)));

/** The tick with the fewest digits: what an axis far from zero is counted from. */
function roundest(values) {
  const length = (value) =>
    String(Number(value.toPrecision(15)))
      .replace(/e.*|\D/g, "")
      .replace(/0+$/, "").length;
  return Number(values.reduce((best, v) => (length(v) < length(best) ? v : best)).toPrecision(15));
}

/** Ticks at round values, with a shared power of ten, or an offset when the digits would not fit. */
function linearTicks(low, high, count) {
  const values = d3Array.ticks(low, high, count).filter(Number.isFinite).slice(0, MOST_TICKS);
  if (values.length < 2) return { ticks: values.map((value) => ({ value, text: formatNumber(value, 6) })), note: {} };
  const step = values[1] - values[0];
  const size = Math.max(Math.abs(low), Math.abs(high));
  const exponent = size >= 1e5 || size < 1e-3 ? exponentOf(size) : 0;
  if (decimals(step / powerOfTen(exponent)) > 5) return offsetTicks(values);
  const digits = decimals(step / powerOfTen(exponent));
  const text = (value) => withMinus((value / powerOfTen(exponent)).toFixed(digits).replace(/^-(0\.?0*)$/, "$1"));
  return { ticks: values.map((value) => ({ value, text: text(value) })), note: { exponent } };
}

/** 1.0000002, 1.0000004 become 2, 4 with "− 1" and "10⁻⁷" in the title. */
function offsetTicks(values) {
  const offset = roundest(values);
  const step = (values[values.length - 1] - values[0]) / (values.length - 1);
  const farthest = Math.max(Math.abs(values[0] - offset), Math.abs(values[values.length - 1] - offset));
  const exponent = exponentOf(farthest);
  const digits = decimals(step / powerOfTen(exponent));
  const text = (value) => {
    const steps = Math.round((value - offset) / step);
    return withMinus(((steps * step) / powerOfTen(exponent)).toFixed(digits).replace(/^-(0\.?0*)$/, "$1"));
  };
  return { ticks: values.map((value) => ({ value, text: text(value) })), note: { exponent, offset } };
}

/** Between decades: 2 and 5 are labelled when there are few decades, the rest are small ticks. */
function withinDecade(k, span) {
  const labelled = (m) => span < 1.6 && (m === 2 || m === 5);
  const text = (m) => (Math.abs(k) < 3 ? String(Number(`${m}e${k}`)) : `${m}×${powerText(k)}`);
  return [2, 3, 4, 5, 6, 7, 8, 9].map((m) => ({ value: Number(`${m}e${k}`), text: labelled(m) ? text(m) : "" }));
}

function logTicks(low, high, count) {
  const span = high - low;
  if (span < 0.7) return linearTicks(10 ** low, 10 ** high, count);
  const step = decadeStep(span, count);
  const ticks = [];
  const first = Math.floor(low),
    decades = Math.min(MOST_DECADES, Math.ceil(high) - first);
  for (let i = 0; i <= decades; i++) {
    const k = first + i;
    if (k % step === 0) ticks.push({ value: powerOfTen(k), text: powerText(k) });
    else if (step <= 10) ticks.push({ value: powerOfTen(k), text: "" });
    if (step === 1 && span < 12) ticks.push(...withinDecade(k, span));
  }
  return { ticks, note: {} };
}

/** Decades on both sides of zero down to the linear part, which only zero labels. */
function symlogTicks(scale, count) {
  const { low, high } = scale;
  const largest = Math.max(Math.abs(scale.inverse(low)), Math.abs(scale.inverse(high)));
  const narrow = low * high > 0 && high - low < 0.7;
  if (largest < 3 * scale.width || narrow) return linearTicks(scale.inverse(low), scale.inverse(high), count);
  const top = exponentOf(largest);
  const decades = Math.min(MOST_DECADES, top - Math.ceil(Math.log10(scale.width) - 1e-9));
  const step = decadeStep(high - low, count);
  const ticks = [{ value: 0, text: "0" }];
  for (let i = 0; i <= decades; i++) {
    const k = top - i;
    const clearOfZero = scale.forward(powerOfTen(k)) > 0.6 * step;
    const text = i % step === 0 && clearOfZero ? powerText(k) : "";
    ticks.push({ value: powerOfTen(k), text }, { value: -powerOfTen(k), text: text && "−" + text });
  }
  return { ticks, note: {} };
}

function candidateTicks(scale, count) {
  if (scale.scale === "log") return logTicks(scale.low, scale.high, count);
  if (scale.scale === "symlog") return symlogTicks(scale, count);
  return linearTicks(scale.low, scale.high, count);
}

const onAxis = (tick) => tick.at >= -1e-9 && tick.at <= 1 + 1e-9;
const labelsIn = (ticks) => ticks.filter((tick) => tick.text).length;

function placed(scale, { ticks, note }) {
  const here = ticks.map((tick) => ({ ...tick, at: scale.place(tick.value) })).filter(onAxis);
  return { ticks: here.sort((one, other) => one.at - other.at), note };
}

/** The ticks on the axis, each with its fraction ``at``; sets what the title must add. One label alone does not tell a
    scale, so the count is raised and at last plain round values are taken. */
function axisTicks(scale, count) {
  if (scale.ticks) return placed(scale, { ticks: scale.ticks.map(([value, text]) => ({ value, text })) }).ticks;
  let found = placed(scale, candidateTicks(scale, count));
  if (labelsIn(found.ticks) < 2) found = placed(scale, candidateTicks(scale, 2 * count));
  if (labelsIn(found.ticks) < 2) {
    found = placed(scale, linearTicks(scale.inverse(scale.low), scale.inverse(scale.high), 2 * count));
  }
  scale.note = found.note;
  return found.ticks;
}

/** Drops the text of every other label until none touches the next; ``size`` gives a label's extent in pixels. */
function thinned(ticks, length, size, gap) {
  for (let round = 0; round < 6; round++) {
    const labels = ticks.filter((tick) => tick.text);
    const touching = labels.some(
      (tick, i) =>
        i > 0 && (tick.at - labels[i - 1].at) * length < (size(tick.text) + size(labels[i - 1].text)) / 2 + gap,
    );
    if (!touching) break;
    labels.forEach((tick, i) => {
      if (i % 2) tick.text = "";
    });
  }
  return ticks;
}
