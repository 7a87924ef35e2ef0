/* Text on the canvas: measured once, drawn with a halo, put where there is room. */

/** DejaVu Sans, Segoe UI and the system fonts of Apple all have the superscript digits and minus. */
const FONT = "12px 'DejaVu Sans', 'Segoe UI', system-ui, sans-serif";
const TEXT_HEIGHT = 14;
const CELL = 4;

const ruler = document.createElement("canvas").getContext("2d");
const measured = new Map();

function textWidth(text) {
  let width = measured.get(text);
  if (width === undefined) {
    ruler.font = FONT;
    width = ruler.measureText(text).width;
    if (measured.size > 4000) measured.clear();
    measured.set(text, width);
  }
  return width;
}

/** Where curves run, in coarse cells, so that texts can keep off them. */
class Crowd {
  constructor(width, height) {
    this.columns = Math.ceil(width / CELL) + 1;
    this.rows = Math.ceil(height / CELL) + 1;
    this.cells = new Uint8Array(this.columns * this.rows);
  }

  mark(x, y) {
    const column = (x / CELL) | 0,
      row = (y / CELL) | 0;
    if (column >= 0 && row >= 0 && column < this.columns && row < this.rows)
      this.cells[row * this.columns + column] = 1;
  }

  segment(x0, y0, x1, y1) {
    const steps = Math.min(2000, Math.ceil(Math.max(Math.abs(x1 - x0), Math.abs(y1 - y0)) / CELL) || 1);
    for (let i = 0; i <= steps; i++) this.mark(x0 + ((x1 - x0) * i) / steps, y0 + ((y1 - y0) * i) / steps);
  }

  /** How many crowded cells a box covers. */
  under([left, top, right, bottom]) {
    let count = 0;
    const first = Math.max(0, (left / CELL) | 0),
      last = Math.min(this.columns - 1, (right / CELL) | 0);
    for (let row = Math.max(0, (top / CELL) | 0); row <= Math.min(this.rows - 1, (bottom / CELL) | 0); row++) {
      for (let column = first; column <= last; column++) count += this.cells[row * this.columns + column];
    }
    return count;
  }
}

const overlap = (a, b, gap) => a[0] < b[2] + gap && a[2] + gap > b[0] && a[1] < b[3] && a[3] > b[1];
const inside = (a, b) => a[0] >= b[0] && a[1] >= b[1] && a[2] <= b[2] && a[3] <= b[3];

/** The texts of one picture: each takes the least crowded free place offered, or is left over for the legend. */
class Texts {
  constructor(context, width, height) {
    this.context = context;
    this.canvas = [0, 0, width, height];
    this.boxes = [];
    this.crowd = new Crowd(width, height);
    this.written = [];
  }

  box(text, x, y, align) {
    const width = textWidth(text);
    const left = align === "right" ? x - width : align === "center" ? x - width / 2 : x;
    return [left, y - TEXT_HEIGHT / 2, left + width, y + TEXT_HEIGHT / 2];
  }

  free(box) {
    return inside(box, this.canvas) && !this.boxes.some((other) => overlap(box, other, 4));
  }

  /** Writes at the best of some places [x, y, align]; earlier ones win ties. The box written in, or null. */
  put(text, places, { colour, paper, within = this.canvas }) {
    let best = null,
      least = Infinity;
    places.forEach(([x, y, align = "left"], rank) => {
      const box = this.box(text, x, y, align);
      if (!inside(box, within) || !this.free(box)) return;
      const cost = this.crowd.under(box) + 0.5 * rank;
      if (cost < least) [best, least] = [box, cost];
    });
    if (best) this.write(text, best, colour, paper);
    return best;
  }

  write(text, box, colour, paper) {
    const { context } = this;
    this.boxes.push(box);
    this.written.push({ text, box });
    context.font = FONT;
    context.textAlign = "left";
    context.textBaseline = "middle";
    context.lineJoin = "round";
    context.lineWidth = 3.5;
    context.strokeStyle = paper;
    context.setLineDash([]);
    context.strokeText(text, box[0], box[1] + TEXT_HEIGHT / 2);
    context.fillStyle = colour;
    context.fillText(text, box[0], box[1] + TEXT_HEIGHT / 2);
  }

  /** Keeps a region free of texts, for example a marked point. */
  reserve(x, y, radius) {
    this.boxes.push([x - radius, y - radius, x + radius, y + radius]);
  }
}
