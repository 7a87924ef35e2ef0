/* Where the plot, its axis texts, end labels and colour bar stand in a cell, in CSS pixels. */

const MARGIN_TOP = 10;
const MARGIN_BOTTOM = 40;
const AXIS_TITLE = 17;
const TICK_GAP = 7;
const BAR_GAP = 10;
const BAR_WIDTH = 12;
const MOST_FOR_LABELS = 0.22;

/** Margins move in steps, so that a plot does not tremble while numbers change. */
const stepped = (pixels) => Math.ceil(pixels / 8) * 8;

const widest = (texts) => texts.reduce((most, text) => Math.max(most, textWidth(text)), 0);
const tickTexts = (ticks) => ticks.map((tick) => tick.text);

/** The last point of a curve inside the view as fractions [x, y], or null. */
function lastVisible({ x, y }, scales) {
  for (let i = Math.min(x.length, y.length) - 1; i >= 0; i--) {
    const fx = scales.x.fraction(x[i]),
      fy = scales.y.fraction(y[i]);
    if (fx >= 0 && fx <= 1 && fy >= 0 && fy <= 1) return [fx, fy];
  }
  return null;
}

/** Lines that reach the right edge have their label in the margin. */
const endsRight = (end) => end !== null && end[0] > 0.93;

function endLabels(marks, scales) {
  const labelled = marks.filter((mark) => mark.kind === "line" && mark.label);
  return labelled.map((mark) => ({ mark, end: lastVisible(mark, scales) }));
}

function rightMargin(view, width, labels, barTicks) {
  if (view.map) return BAR_GAP + BAR_WIDTH + TICK_GAP + widest(tickTexts(barTicks)) + 4 + AXIS_TITLE;
  const most = MOST_FOR_LABELS * width;
  const texts = labels.filter(({ end }) => endsRight(end)).map(({ mark }) => mark.label);
  return 14 + widest(texts.filter((text) => textWidth(text) <= most));
}

/** {box, xTicks, yTicks, barTicks, labels}: everything the painters need to know about places. */
function layOut(view, width, height) {
  const { x, y, z } = view.scales;
  const plotHeight = Math.max(40, height - MARGIN_TOP - MARGIN_BOTTOM);
  const tall = () => TEXT_HEIGHT - 2;
  const yTicks = thinned(axisTicks(y, Math.max(2, Math.floor(plotHeight / 34))), plotHeight, tall, 2);
  const barTicks = z ? thinned(axisTicks(z, Math.max(2, Math.floor(plotHeight / 34))), plotHeight, tall, 2) : [];
  const labels = endLabels(view.marks, view.scales);
  const left = stepped(AXIS_TITLE + 2 + widest(tickTexts(yTicks)) + TICK_GAP);
  const right = stepped(rightMargin(view, width, labels, barTicks));
  const box = { left, top: MARGIN_TOP, width: Math.max(40, width - left - right), height: plotHeight };
  const count = Math.max(2, Math.floor(box.width / 60));
  const xTicks = thinned(axisTicks(x, count), box.width, textWidth, 8);
  return { box, xTicks, yTicks, barTicks, labels };
}
