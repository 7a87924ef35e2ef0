/* One picture being painted: frame, grid, axis texts, and curves clipped to the plot. */

class Picture {
  constructor(view, context, width, height) {
    Object.assign(this, { view, context, theme: view.theme, scales: view.scales }, layOut(view, width, height));
    this.texts = new Texts(context, width, height);
    this.legend = [];
    this.later = [];
    this.edges = [this.box.left, this.box.top, this.box.left + this.box.width, this.box.top + this.box.height];
  }

  X(fraction) {
    return this.box.left + fraction * this.box.width;
  }
  Y(fraction) {
    return this.box.top + (1 - fraction) * this.box.height;
  }
  style(index) {
    return this.theme.styles[((index % 8) + 8) % 8];
  }

  clipped(draw) {
    const { context, box } = this;
    context.save();
    context.beginPath();
    context.rect(box.left, box.top, box.width, box.height);
    context.clip();
    draw();
    context.restore();
  }

  stroke(colour, width, dash = []) {
    Object.assign(this.context, { strokeStyle: colour, lineWidth: width, lineJoin: "round" });
    this.context.setLineDash(dash);
    this.context.stroke();
  }

  /** A text on the plot, with a thin leader to its ``anchor`` [x, y] when it had to stand far off; what finds no place
      goes to the legend line under the title. */
  label(text, places, ink, { dash = null, anchor = null } = {}) {
    if (!text) return;
    const box = this.texts.put(text, places, { colour: ink, paper: this.theme.paper, within: this.edges });
    if (!box) this.legend.push({ text, colour: ink, dash });
    else if (anchor) this.leader(anchor, box);
  }

  leader([x, y], [left, top, right, bottom]) {
    const end = [Math.max(left, Math.min(right, x)), Math.max(top + 2, Math.min(bottom - 2, y))];
    const length = Math.hypot(end[0] - x, end[1] - y),
      start = 8 / length;
    if (length < 16) return;
    strokeLines(this, [[x + start * (end[0] - x), y + start * (end[1] - y), ...end]], this.theme.text, 0.8);
  }
}

/** Half a pixel off, a one-pixel line is sharp. */
const sharp = (pixels) => Math.round(pixels) + 0.5;

function strokeLines(picture, segments, colour, width) {
  const { context } = picture;
  context.beginPath();
  for (const [x0, y0, x1, y1] of segments) {
    context.moveTo(x0, y0);
    context.lineTo(x1, y1);
  }
  picture.stroke(colour, width);
}

function paintGrid(picture) {
  const [left, top, right, bottom] = picture.edges;
  const columns = picture.xTicks.filter((tick) => tick.text).map((tick) => sharp(picture.X(tick.at)));
  const rows = picture.yTicks.filter((tick) => tick.text).map((tick) => sharp(picture.Y(tick.at)));
  strokeLines(
    picture,
    columns.map((x) => [x, top, x, bottom]),
    picture.theme.grid,
    1,
  );
  strokeLines(
    picture,
    rows.map((y) => [left, y, right, y]),
    picture.theme.grid,
    1,
  );
}

function paintFrame(picture) {
  const { context, theme } = picture;
  const [left, top, right, bottom] = picture.edges;
  const length = (tick) => (tick.text ? 5 : 2.5);
  const below = picture.xTicks.map((tick) => [sharp(picture.X(tick.at)), bottom, length(tick)]);
  const beside = picture.yTicks.map((tick) => [left, sharp(picture.Y(tick.at)), length(tick)]);
  strokeLines(
    picture,
    below.map(([x, y, size]) => [x, y, x, y + size]),
    theme.text,
    1,
  );
  strokeLines(
    picture,
    beside.map(([x, y, size]) => [x, y, x - size, y]),
    theme.text,
    1,
  );
  context.beginPath();
  context.rect(sharp(left), sharp(top), Math.round(right - left) - 1, Math.round(bottom - top) - 1);
  picture.stroke(theme.text, 1);
}

function paintAxisTexts(picture) {
  const { context, theme, scales, box } = picture;
  Object.assign(context, { font: FONT, fillStyle: theme.text, textBaseline: "middle", textAlign: "center" });
  const bottom = box.top + box.height;
  for (const tick of picture.xTicks) if (tick.text) context.fillText(tick.text, picture.X(tick.at), bottom + 13);
  context.fillText(scales.x.title(), box.left + box.width / 2, bottom + 30);
  context.textAlign = "right";
  for (const tick of picture.yTicks)
    if (tick.text) context.fillText(tick.text, box.left - TICK_GAP, picture.Y(tick.at));
  uprightText(picture, scales.y.title(), AXIS_TITLE / 2 + 1);
}

/** Text turned upwards beside the plot, at a distance from the left edge of the cell; smaller when the cell is low. */
function uprightText({ context, box }, text, x) {
  const room = box.top + box.height + MARGIN_BOTTOM,
    fitted = Math.min(1, (room - 8) / textWidth(text));
  const half = (textWidth(text) * fitted) / 2 + 4;
  context.save();
  context.translate(x, Math.max(half, Math.min(room - half, box.top + box.height / 2)));
  context.rotate(-Math.PI / 2);
  context.scale(fitted, fitted);
  context.textAlign = "center";
  context.fillText(text, 0, 0);
  context.restore();
}

/** The part [from, to] of a segment inside a box (Liang & Barsky 1984), or null. A dash over a billion pixels would
    stall the canvas, so curves are cut before they are drawn. */
function visiblePart(x0, y0, x1, y1, [left, top, right, bottom]) {
  const dx = x1 - x0,
    dy = y1 - y0;
  let from = 0,
    to = 1;
  for (const [slope, room] of [
    [-dx, x0 - left],
    [dx, right - x0],
    [-dy, y0 - top],
    [dy, bottom - y0],
  ]) {
    if (slope === 0) {
      if (room < 0) return null;
    } else if (slope < 0) from = Math.max(from, room / slope);
    else to = Math.min(to, room / slope);
  }
  return from <= to ? [from, to] : null;
}

const isInside = (x, y, [left, top, right, bottom]) => x >= left && x <= right && y >= top && y <= bottom;

/** Builds the path of a curve, broken at gaps; a point between two gaps becomes a dot. Returns the dots. */
function tracePath(picture, xs, ys) {
  const { context, box, scales, edges, texts } = picture;
  const kx = box.width / (scales.x.end - scales.x.start),
    ky = box.height / (scales.y.end - scales.y.start);
  const room = [edges[0] - 20, edges[1] - 20, edges[2] + 20, edges[3] + 20];
  const dots = [];
  let px = NaN,
    py = NaN,
    joined = false,
    lone = false;
  context.beginPath();
  for (let i = 0; i <= Math.min(xs.length, ys.length); i++) {
    const x = box.left + (xs[i] - scales.x.start) * kx,
      y = edges[3] - (ys[i] - scales.y.start) * ky;
    if (!Number.isFinite(x + y)) {
      if (lone) dots.push([px, py]);
      [px, joined, lone] = [NaN, false, false];
      continue;
    }
    if (Number.isNaN(px)) lone = true;
    else {
      lone = false;
      joined = traceSegment(context, px, py, x, y, room, joined, texts.crowd);
    }
    [px, py] = [x, y];
  }
  return dots.filter(([x, y]) => isInside(x, y, edges));
}

/** Adds one segment to the path; true when the next one can go on from its end. */
function traceSegment(context, x0, y0, x1, y1, room, joined, crowd) {
  const whole = isInside(x0, y0, room) && isInside(x1, y1, room);
  const part = whole ? [0, 1] : visiblePart(x0, y0, x1, y1, room);
  if (!part) return false;
  const [from, to] = part;
  const ax = x0 + from * (x1 - x0),
    ay = y0 + from * (y1 - y0),
    bx = x0 + to * (x1 - x0),
    by = y0 + to * (y1 - y0);
  if (!joined || from > 0) context.moveTo(ax, ay);
  context.lineTo(bx, by);
  crowd.segment(ax, ay, bx, by);
  return to === 1;
}
