/* Maps: the coloured image, contour lines and the colour bar. */

/** Colour number 1..255 of a value in scale coordinates; 0 where there is none. The same rule as in frame.py. */
function colourNumber(value, low, high) {
  if (!Number.isFinite(value)) return 0;
  return 1 + Math.max(0, Math.min(254, Math.round(((value - low) / (high - low)) * 254)));
}

function colourImage(mark, [low, high]) {
  const [columns, rows] = mark.shape;
  const canvas = document.createElement("canvas");
  Object.assign(canvas, { width: columns, height: rows });
  const context = canvas.getContext("2d");
  const image = context.createImageData(columns, rows);
  const pixels = new Uint32Array(image.data.buffer),
    colours = PACKED_TABLES[mark.palette];
  const coded = mark.values instanceof Uint8Array;
  for (let row = 0; row < rows; row++) {
    const out = (rows - 1 - row) * columns; // the first row is the lowest
    for (let column = 0; column < columns; column++) {
      const value = mark.values[row * columns + column];
      const colour = coded ? value : colourNumber(value, low, high);
      pixels[out + column] = colour ? colours[colour] : 0;
    }
  }
  context.putImageData(image, 0, 0);
  return canvas;
}

/** Corners above the level, as bits of a square (counted from the lower left, anticlockwise) -> pairs of crossed edges. */
const CROSSINGS = [
  [],
  [[3, 0]],
  [[0, 1]],
  [[3, 1]],
  [[1, 2]],
  [
    [3, 2],
    [0, 1],
  ],
  [[0, 2]],
  [[3, 2]],
  [[2, 3]],
  [[2, 0]],
  [
    [0, 3],
    [1, 2],
  ],
  [[2, 1]],
  [[1, 3]],
  [[1, 0]],
  [[0, 3]],
  [],
];

/** Marching squares (Lorensen & Cline 1987, in two dimensions): x0, y0, x1, y1 of each piece of the line, in cells from
    the centre of the first. A square that touches a missing value has no line. */
function contourPieces(values, [columns, rows], level, isMissing) {
  const pieces = [];
  let corner;
  const part = (a, b) => (level - corner[a]) / (corner[b] - corner[a]);
  const edge = [
    (i, j) => [i + part(0, 1), j],
    (i, j) => [i + 1, j + part(1, 2)],
    (i, j) => [i + part(3, 2), j + 1],
    (i, j) => [i, j + part(0, 3)],
  ];
  for (let j = 0; j < rows - 1; j++) {
    for (let i = 0; i < columns - 1; i++) {
      const at = j * columns + i;
      const above =
        (values[at] > level) |
        ((values[at + 1] > level) << 1) |
        ((values[at + columns + 1] > level) << 2) |
        ((values[at + columns] > level) << 3);
      if (above === 0 || above === 15) continue;
      corner = [values[at], values[at + 1], values[at + columns + 1], values[at + columns]];
      if (corner.some(isMissing)) continue;
      for (const [from, to] of CROSSINGS[above]) pieces.push(...edge[from](i, j), ...edge[to](i, j));
    }
  }
  return Float32Array.from(pieces);
}

/** The level in the numbers the map came in: scale coordinates, or colours while dragging. */
function levelInValues(mark, scale, level) {
  const t = scale.forward(level);
  if (!(mark.values instanceof Uint8Array)) return t;
  return 1 + (254 * (t - scale.home[0])) / (scale.home[1] - scale.home[0]);
}

const sameNumbers = (one, other) => one.length === other.length && one.every((value, i) => Object.is(value, other[i]));

/** All that the picture of a map depends on besides its values. */
const recipe = ({ shape, levels, palette, values }, { home, width }) =>
  JSON.stringify([shape, levels, palette, values.constructor.name, home, width]);

/** Whether what was prepared for a map still stands: often only the star moves over it. */
const stillPrepared = (prepared, mark, scale) =>
  prepared?.recipe === recipe(mark, scale) && sameNumbers(prepared.values, mark.values);

/** Image and contour lines of a map, made when it changes. */
function prepareMap(mark, scale) {
  const isMissing = mark.values instanceof Uint8Array ? (v) => v === 0 : (v) => !Number.isFinite(v);
  const lines = mark.levels.map((level) => ({
    level,
    pieces: contourPieces(mark.values, mark.shape, levelInValues(mark, scale, level), isMissing),
  }));
  return { recipe: recipe(mark, scale), values: mark.values, image: colourImage(mark, scale.home), lines };
}

function paintMap(picture, mark) {
  const { context, view, scales } = picture;
  const [x0, x1] = mark.x.map((t) => picture.X(scales.x.fraction(t)));
  const [y0, y1] = mark.y.map((t) => picture.Y(scales.y.fraction(t)));
  context.imageSmoothingEnabled = false;
  picture.clipped(() => {
    context.save();
    context.translate(x0, y1);
    context.scale(Math.sign(x1 - x0) || 1, Math.sign(y0 - y1) || 1); // a reversed axis mirrors the image
    context.drawImage(view.prepared.image, 0, 0, Math.abs(x1 - x0), Math.abs(y0 - y1));
    context.restore();
  });
}

/** Contour lines over the map: dark in a light seam, so that they show on every colour; zero is thicker. */
function paintContours(picture, mark) {
  const [columns, rows] = mark.shape,
    { scales } = picture;
  const X = (i) => picture.X(scales.x.fraction(mark.x[0] + ((mark.x[1] - mark.x[0]) * (i + 0.5)) / columns));
  const Y = (j) => picture.Y(scales.y.fraction(mark.y[0] + ((mark.y[1] - mark.y[0]) * (j + 0.5)) / rows));
  for (const { level, pieces } of picture.view.prepared.lines) {
    if (!pieces.length) continue;
    picture.clipped(() => strokeContour(picture, pieces, X, Y, level));
    picture.later.push(() => labelContour(picture, pieces, X, Y, level));
  }
}

function strokeContour(picture, pieces, X, Y, level) {
  const { context } = picture;
  context.beginPath();
  for (let k = 0; k < pieces.length; k += 4) {
    context.moveTo(X(pieces[k]), Y(pieces[k + 1]));
    context.lineTo(X(pieces[k + 2]), Y(pieces[k + 3]));
  }
  context.lineCap = "round";
  picture.stroke("rgba(255,255,255,.55)", 3);
  picture.stroke("rgba(0,0,0,.85)", level === 0 ? 1.8 : 1);
}

const CONTOUR_PLACES = 24;

function labelContour(picture, pieces, X, Y, level) {
  const count = pieces.length / 4,
    stride = Math.max(1, Math.floor(count / CONTOUR_PLACES));
  const places = [];
  for (let k = Math.floor(count / 2) % stride; k < count; k += stride) {
    places.push([X(pieces[4 * k]), Y(pieces[4 * k + 1]), "center"]);
  }
  const visible = places.filter(([x, y]) => isInside(x, y, picture.edges));
  if (!visible.length) return;
  const { box } = picture,
    off = ([x, y]) => Math.hypot(x - box.left - box.width / 2, y - box.top - box.height / 2);
  visible.sort((one, other) => off(one) - off(other));
  const text = formatNumber(level, 3);
  const written = picture.texts.put(text, visible, { colour: "#000", paper: "#fff", within: picture.edges });
  if (!written) picture.legend.push({ text: `contour ${text}`, colour: picture.theme.text, dash: null });
}

const barImages = {};

function barImage(palette) {
  if (!barImages[palette]) {
    const canvas = document.createElement("canvas");
    Object.assign(canvas, { width: 1, height: 255 });
    const context = canvas.getContext("2d"),
      image = context.createImageData(1, 255);
    const pixels = new Uint32Array(image.data.buffer);
    for (let i = 0; i < 255; i++) pixels[i] = PACKED_TABLES[palette][255 - i];
    context.putImageData(image, 0, 0);
    barImages[palette] = canvas;
  }
  return barImages[palette];
}

function paintColourBar(picture, mark) {
  const { context, theme, box, scales } = picture;
  const left = Math.round(box.left + box.width + BAR_GAP),
    right = left + BAR_WIDTH;
  context.imageSmoothingEnabled = true;
  context.drawImage(barImage(mark.palette), left, box.top, BAR_WIDTH, box.height);
  const levels = mark.levels.map((level) => scales.z.place(level)).filter((at) => at >= 0 && at <= 1);
  strokeLines(
    picture,
    levels.map((at) => [left, picture.Y(at), right, picture.Y(at)]),
    "rgba(0,0,0,.8)",
    1,
  );
  const ticks = picture.barTicks.map((tick) => [
    right,
    sharp(picture.Y(tick.at)),
    right + 4,
    sharp(picture.Y(tick.at)),
  ]);
  strokeLines(picture, ticks, theme.text, 1);
  Object.assign(context, { font: FONT, fillStyle: theme.text, textAlign: "left", textBaseline: "middle" });
  for (const { text, at } of picture.barTicks) if (text) context.fillText(text, right + TICK_GAP, picture.Y(at));
  uprightText(picture, scales.z.title(), right + TICK_GAP + widest(tickTexts(picture.barTicks)) + 4 + AXIS_TITLE / 2);
}
