/* The marks of a chart, one painter a kind. */

function drawLine(picture, mark) {
  const { line, dash } = picture.style(mark.style);
  picture.clipped(() => {
    const dots = tracePath(picture, mark.x, mark.y);
    if (picture.view.map) picture.stroke(picture.theme.paper, mark.width + 2); // a seam sets curves off from colours
    picture.stroke(line, mark.width, dash);
    for (const [x, y] of dots) disc(picture.context, x, y, 2, line);
  });
}

function drawBand(picture, mark) {
  const { context } = picture;
  picture.clipped(() => {
    traceBand(picture, mark);
    context.globalAlpha = 0.2;
    context.fillStyle = picture.style(mark.style).line;
    context.fill();
  });
}

/** One polygon for each run without gaps. */
function traceBand(picture, { x, low, high }) {
  const { context, scales } = picture;
  const far = (pixels) => Math.max(-1e4, Math.min(1e4, pixels));
  const X = (i) => far(picture.X(scales.x.fraction(x[i])));
  const Y = (side, i) => far(picture.Y(scales.y.fraction(side[i])));
  const whole = (i) => Number.isFinite(x[i] + low[i] + high[i]);
  context.beginPath();
  for (let i = 0; i < x.length; i++) {
    if (!whole(i)) continue;
    const first = i;
    while (i < x.length && whole(i)) i++;
    for (let k = first; k < i; k++) context[k === first ? "moveTo" : "lineTo"](X(k), Y(high, k));
    for (let k = i - 1; k >= first; k--) context.lineTo(X(k), Y(low, k));
    context.closePath();
  }
}

function drawSpan(picture, mark) {
  const { context, theme, scales, edges } = picture;
  const end = (value, open) =>
    value === null ? open : Math.max(-0.01, Math.min(1.01, scales[mark.axis].place(value)));
  const scale = scales[mark.axis],
    up = scale.start < scale.end;
  const [from, to] = [end(mark.low, up ? -0.01 : 1.01), end(mark.high, up ? 1.01 : -0.01)].sort((a, b) => a - b);
  if (!(to > 0 && from < 1 && to > from)) return;
  const along = mark.axis === "x";
  const [a, b] = along ? [picture.X(from), picture.X(to)] : [picture.Y(to), picture.Y(from)];
  const [left, top, right, bottom] = along ? [a, edges[1], b, edges[3]] : [edges[0], a, edges[2], b];
  picture.clipped(() => {
    context.fillStyle = theme.shade;
    context.fillRect(left, top, right - left, bottom - top);
  });
  picture.later.push(() => labelSpan(picture, mark, [left, top, right, bottom]));
}

function labelSpan(picture, mark, [left, top, right, bottom]) {
  const { edges, theme } = picture;
  const from = Math.max(left, edges[0]) + 4,
    to = Math.min(right, edges[2]) - 4;
  const high = Math.max(top, edges[1]) + 10,
    low = Math.min(bottom, edges[3]) - 10;
  const rows = [low, low - 15, high, high + 15, (low + high) / 2, low - 30, high + 30];
  const places = rows.flatMap((y) => [
    [from, y],
    [to, y, "right"],
    [(from + to) / 2, y, "center"],
  ]);
  picture.label(mark.label, places, theme.text);
}

function drawRule(picture, mark) {
  const { context, scales, edges, view } = picture;
  const along = mark.axis === "x";
  const at = scales[mark.axis].place(view.held(mark)?.[mark.axis] ?? mark.at);
  if (!(at >= 0 && at <= 1)) return;
  const place = along ? sharp(picture.X(at)) : sharp(picture.Y(at));
  const { line, ink, dash } = picture.style(mark.style);
  context.beginPath();
  if (along) (context.moveTo(place, edges[1]), context.lineTo(place, edges[3]));
  else (context.moveTo(edges[0], place), context.lineTo(edges[2], place));
  picture.stroke(line, 1.3, dash);
  if (along) picture.texts.crowd.segment(place, edges[1], place, edges[3]);
  else picture.texts.crowd.segment(edges[0], place, edges[2], place);
  if (mark.handle) drawGrip(picture, along, place, line);
  const places = along ? besideRule(picture, place) : aboveRule(picture, place);
  picture.later.push(() => picture.label(mark.label, places, ink, { dash }));
}

/** A small triangle at the end of a rule that can be dragged. */
function drawGrip({ context, edges }, along, place, colour) {
  const [left, top] = edges;
  context.beginPath();
  if (along)
    polygon(context, [
      [place - 6, top],
      [place + 6, top],
      [place, top + 9],
    ]);
  else
    polygon(context, [
      [left, place - 6],
      [left, place + 6],
      [left + 9, place],
    ]);
  context.fillStyle = colour;
  context.fill();
}

function besideRule({ edges }, x) {
  const rows = [10, 25, 40, 55, 70, 85, 100].map((down) => edges[1] + down);
  return rows.flatMap((y) => [
    [x + 6, y],
    [x - 6, y, "right"],
  ]);
}

function aboveRule({ edges }, y) {
  const [left, , right] = edges,
    middle = (left + right) / 2;
  return [y - 9, y + 9].flatMap((row) => [
    [right - 5, row, "right"],
    [left + 12, row],
    [middle, row, "center"],
  ]);
}

function polygon(context, corners) {
  corners.forEach(([x, y], i) => context[i ? "lineTo" : "moveTo"](x, y));
  context.closePath();
}

function disc(context, x, y, radius, colour) {
  context.beginPath();
  context.arc(x, y, radius, 0, 2 * Math.PI);
  context.fillStyle = colour;
  context.fill();
}

/** Paths of the kinds of points, around 0, 0. Shape alone tells them apart. */
const SHAPES = {
  present: (context) => context.arc(0, 0, 5, 0, 2 * Math.PI),
  stable: (context) => context.arc(0, 0, 4.5, 0, 2 * Math.PI),
  unstable: (context) =>
    polygon(context, [
      [0, -6],
      [5.5, 4],
      [-5.5, 4],
    ]),
  onset: (context) =>
    polygon(context, [
      [0, -6.5],
      [6.5, 0],
      [0, 6.5],
      [-6.5, 0],
    ]),
  end: (context) => context.rect(-4.5, -4.5, 9, 9),
  outside: (context) =>
    polygon(context, [
      [7, 0],
      [-3, -6],
      [-3, 6],
    ]),
};

function drawPoint(picture, mark) {
  const { scales, view, theme } = picture;
  const held = view.held(mark);
  const fx = scales.x.place(held?.x ?? mark.x),
    fy = scales.y.place(held?.y ?? mark.y);
  if (!Number.isFinite(fx + fy)) return;
  const x = picture.X(Math.max(0, Math.min(1, fx))),
    y = picture.Y(Math.max(0, Math.min(1, fy)));
  const outside = fx < -1e-6 || fx > 1 + 1e-6 || fy < -1e-6 || fy > 1 + 1e-6;
  if (outside && mark.shape !== "present") return;
  if (outside) drawShape(picture, "outside", x, y, Math.atan2(-(fy - clampFraction(fy)), fx - clampFraction(fx)));
  else drawShape(picture, mark.shape, x, y, 0);
  picture.texts.reserve(x, y, 6);
  picture.later.push(() => picture.label(mark.label, aroundPoint(x, y), theme.text, { anchor: [x, y] }));
}

const clampFraction = (fraction) => Math.max(0, Math.min(1, fraction));

function drawShape({ context, theme }, shape, x, y, angle) {
  const accent = shape === "present" || shape === "outside" ? theme.styles[1].line : theme.text;
  context.save();
  context.translate(x, y);
  context.rotate(angle);
  context.setLineDash([]);
  context.beginPath();
  SHAPES[shape](context);
  Object.assign(context, { lineJoin: "round", strokeStyle: theme.paper, lineWidth: 6 });
  context.stroke();
  if (shape === "present") (Object.assign(context, { strokeStyle: theme.text, lineWidth: 5 }), context.stroke());
  if (shape === "present") (Object.assign(context, { strokeStyle: theme.paper, lineWidth: 2.5 }), context.stroke());
  context.fillStyle = shape === "unstable" ? theme.paper : accent;
  context.fill();
  if (shape === "unstable") (Object.assign(context, { strokeStyle: accent, lineWidth: 1.8 }), context.stroke());
  context.restore();
}

function aroundPoint(x, y) {
  const beside = [
    [x + 11, y],
    [x - 11, y, "right"],
    [x, y - 16, "center"],
    [x, y + 16, "center"],
  ];
  const corners = [
    [x + 9, y - 13],
    [x + 9, y + 13],
    [x - 9, y - 13, "right"],
    [x - 9, y + 13, "right"],
  ];
  const farther = [
    [x + 14, y - 28],
    [x + 14, y + 28],
    [x - 14, y - 28, "right"],
    [x - 14, y + 28, "right"],
  ];
  return [...beside, ...corners, ...farther];
}

/** Labels of lines that end at the right edge: in the margin, in order, pushed apart, with a thin leader when moved. */
function labelEnds(picture) {
  const right = picture.edges[2],
    least = picture.edges[1] - 2,
    most = picture.edges[3] + 2;
  const room = picture.texts.canvas[2] - right - 10;
  const fitting = (label) => !picture.view.map && endsRight(label.end) && textWidth(label.mark.label) <= room;
  const ends = picture.labels
    .filter(fitting)
    .map(({ mark, end }) => ({ mark, y: picture.Y(end[1]), x: picture.X(end[0]) }));
  const kept = Math.floor((most - least) / TEXT_HEIGHT) + 1;
  pushApart(ends, least, most).forEach((end, i) => {
    const { line, ink, dash } = picture.style(end.mark.style);
    if (i >= kept) return picture.legend.push({ text: end.mark.label, colour: ink, dash });
    if (Math.abs(end.at - end.y) > 4) strokeLines(picture, [[right + 1, end.y, right + 8, end.at]], line, 1);
    picture.texts.write(
      end.mark.label,
      picture.texts.box(end.mark.label, right + 10, end.at),
      ink,
      picture.theme.paper,
    );
  });
  for (const label of picture.labels) {
    if (!label.end) listAbsent(picture, label);
    else if (!fitting(label)) labelInside(picture, label);
  }
}

/** Gives each label a height ``at``, in the order of the line ends, at least a text's height apart. */
function pushApart(ends, least, most) {
  ends.sort((one, other) => one.y - other.y);
  ends.forEach((end, i) => {
    end.at = Math.max(end.y, i ? ends[i - 1].at + TEXT_HEIGHT : least);
  });
  for (let i = ends.length - 1; i >= 0; i--) {
    ends[i].at = Math.min(ends[i].at, i < ends.length - 1 ? ends[i + 1].at - TEXT_HEIGHT : most);
  }
  return ends;
}

/** A line without a point in the view is still named, so that nobody misses it. */
function listAbsent(picture, { mark }) {
  const { ink, dash } = picture.style(mark.style);
  const empty = !mark.x.some((t, i) => Number.isFinite(t + mark.y[i]));
  picture.legend.push({ text: `${mark.label} (${empty ? "no values" : "outside the view"})`, colour: ink, dash });
}

/** A line that ends inside the plot, or whose label is too long for the margin, is named where it runs. */
function labelInside(picture, { mark }) {
  const { ink, dash } = picture.style(mark.style),
    { x, y } = mark;
  const visible = [];
  for (let i = 0; i < Math.min(x.length, y.length); i++) {
    const px = picture.X(picture.scales.x.fraction(x[i])),
      py = picture.Y(picture.scales.y.fraction(y[i]));
    if (isInside(px, py, picture.edges)) visible.push([px, py]);
  }
  const anchors = [1, 0.85, 0.7, 0.55, 0.4, 0.25, 0.1, 0].map(
    (part) => visible[Math.round(part * (visible.length - 1))],
  );
  const around = ([px, py]) => [
    [px + 6, py],
    [px + 5, py - 11],
    [px + 5, py + 11],
    [px - 5, py - 11, "right"],
    [px - 5, py + 11, "right"],
    [px, py - 13, "center"],
    [px, py + 13, "center"],
  ];
  picture.label(mark.label, anchors.flatMap(around), ink, { dash });
}

function labelBand(picture, mark) {
  const { ink } = picture.style(mark.style),
    { x, low, high } = mark;
  const places = [0.5, 0.7, 0.3, 0.85, 0.15].map((part) => {
    const i = Math.round(part * (x.length - 1)),
      { scales } = picture;
    return [picture.X(scales.x.fraction(x[i])), picture.Y(scales.y.fraction((low[i] + high[i]) / 2)), "center"];
  });
  picture.label(
    mark.label,
    places.filter(([px, py]) => Number.isFinite(px + py)),
    ink,
  );
}

const DRAW = { line: drawLine, band: drawBand, span: drawSpan, rule: drawRule, point: drawPoint };

/** Paints a chart from the bottom up: colours, areas, grid, lines, points, and texts over everything. */
function paintChart(view, context, width, height) {
  context.fillStyle = view.theme.paper; // the canvas is opaque, which browsers put together faster
  context.fillRect(0, 0, width, height);
  const picture = new Picture(view, context, width, height);
  const draw = (...kinds) =>
    view.marks.filter((mark) => kinds.includes(mark.kind)).forEach((m) => DRAW[m.kind](picture, m));
  if (view.map) paintMap(picture, view.map);
  draw("span", "band");
  paintGrid(picture);
  if (view.map) paintContours(picture, view.map);
  draw("line", "rule");
  paintFrame(picture);
  draw("point");
  paintAxisTexts(picture);
  if (view.map) paintColourBar(picture, view.map);
  picture.later
    .splice(0)
    .reverse()
    .forEach((write) => write()); // points are drawn last and named first
  labelEnds(picture);
  view.marks.filter((mark) => mark.kind === "band").forEach((mark) => labelBand(picture, mark));
  return picture;
}
