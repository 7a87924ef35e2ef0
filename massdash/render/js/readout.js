/* What is under the pointer: exact values of the nearest point of a curve, of a marked point, or of a cell. */

const NEAR_CURVE = 40;
const NEAR_POINT = 12;

const withUnit = (scale, value) => `${formatNumber(value)}${scale.unit ? " " + scale.unit : ""}`;
const row = (scale, value) => `${scale.label} = ${withUnit(scale, value)}`;

/** The nearest drawn sample of a curve to a place in the plot: {distance, i, fx, fy}, or null. */
function nearestSample({ x, y }, { scales }, box, px, py) {
  let found = null,
    least = Infinity;
  for (let i = 0; i < Math.min(x.length, y.length); i++) {
    const fx = scales.x.fraction(x[i]),
      fy = scales.y.fraction(y[i]);
    if (!(fx >= 0 && fx <= 1 && fy >= 0 && fy <= 1)) continue;
    const distance = Math.hypot(fx * box.width - px, (1 - fy) * box.height - py);
    if (distance < least) [found, least] = [{ distance, i, fx, fy }, distance];
  }
  return found;
}

function readPoint(view, box, px, py) {
  const { x, y } = view.scales;
  for (const mark of view.marks) {
    if (mark.kind !== "point") continue;
    const fx = x.place(mark.x),
      fy = y.place(mark.y);
    if (!(Math.hypot(fx * box.width - px, (1 - fy) * box.height - py) < NEAR_POINT)) continue;
    return { rows: [mark.label, row(x, mark.x), row(y, mark.y)].filter(Boolean), fx, fy };
  }
  return null;
}

function readCurve(view, box, px, py, only) {
  const { x, y } = view.scales;
  let best = null;
  for (const mark of view.marks) {
    if (mark.kind !== "line" || (only && mark.key !== only)) continue;
    const sample = nearestSample(mark, view, box, px, py);
    if (sample && (!best || sample.distance < best.distance)) best = { ...sample, mark };
  }
  if (!best || (!only && best.distance > NEAR_CURVE)) return null;
  const values = [row(x, x.inverse(best.mark.x[best.i])), row(y, y.inverse(best.mark.y[best.i]))];
  return { rows: [best.mark.label, ...values].filter(Boolean), fx: best.fx, fy: best.fy, key: best.mark.key };
}

/** The cell [column, row] of the map at a place, or null. */
function cellAt(map, { x, y }, fx, fy) {
  const index = (span, t, count) => Math.floor(((t - span[0]) / (span[1] - span[0])) * count);
  const column = index(map.x, x.coordinate(fx), map.shape[0]),
    line = index(map.y, y.coordinate(fy), map.shape[1]);
  return column >= 0 && line >= 0 && column < map.shape[0] && line < map.shape[1] ? [column, line] : null;
}

/** The value of a cell as text; colours tell it only roughly, and not beyond the ends of the bar. */
function cellText(map, scale, [column, line]) {
  const value = map.values[line * map.shape[0] + column];
  if (!(map.values instanceof Uint8Array)) {
    return Number.isFinite(value)
      ? `${scale.label} = ${withUnit(scale, scale.inverse(value))}`
      : `${scale.label}: no value`;
  }
  if (value === 0) return `${scale.label}: no value`;
  const sign = value === 1 ? "≲" : value === 255 ? "≳" : "≈";
  const about = scale.inverse(scale.home[0] + ((value - 1) / 254) * (scale.home[1] - scale.home[0]));
  return `${scale.label} ${sign} ${formatNumber(about, 2)}${scale.unit ? " " + scale.unit : ""}`;
}

function readCell(view, fx, fy) {
  const { map, scales } = view;
  const cell = map && cellAt(map, scales, fx, fy);
  if (!cell) return null;
  const centre = (span, i, count) => span[0] + ((span[1] - span[0]) * (i + 0.5)) / count;
  const tx = centre(map.x, cell[0], map.shape[0]),
    ty = centre(map.y, cell[1], map.shape[1]);
  const rows = [
    row(scales.x, scales.x.inverse(tx)),
    row(scales.y, scales.y.inverse(ty)),
    cellText(map, scales.z, cell),
  ];
  return { rows, fx: scales.x.fraction(tx), fy: scales.y.fraction(ty) };
}

/** The read-out at a place of the plot given as fractions: {rows, fx, fy, key?}. */
function readAt(view, fx, fy, onlyKey) {
  const { box } = view.picture,
    { x, y } = view.scales;
  const px = fx * box.width,
    py = (1 - fy) * box.height;
  if (onlyKey) {
    const curve = readCurve(view, box, px, py, onlyKey);
    if (curve) return curve;
  }
  return (
    readPoint(view, box, px, py) ||
    readCurve(view, box, px, py) ||
    readCell(view, fx, fy) || { rows: [row(x, x.value(fx)), row(y, y.value(fy))], fx, fy }
  );
}
