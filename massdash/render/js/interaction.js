/* Pointer, wheel and keyboard of one chart. */

const NEAR_HANDLE = 9;
const CLICK_SLACK = 4;
const THIN_BOX = 14;
const DOUBLE_CLICK_WAIT = 250;
const ARROWS = { ArrowLeft: [-1, 0], ArrowRight: [1, 0], ArrowUp: [0, 1], ArrowDown: [0, -1] };

class ChartInput {
  constructor(view) {
    Object.assign(this, { view, cursor: null, curve: null, pressed: null, chosen: 0, moved: null, timers: {} });
    this.ended = new AbortController();
    const on = (name, handle, options = {}) =>
      view.plot.addEventListener(name, handle.bind(this), { signal: this.ended.signal, ...options });
    on("pointerdown", this.press);
    on("pointermove", this.move);
    on("pointerup", this.release);
    on("pointercancel", this.cancel);
    on("pointerleave", this.leave);
    on("dblclick", this.reset);
    on("wheel", this.wheel, { passive: false });
    on("keydown", this.key);
    on("keyup", this.keyUp);
    on("blur", this.blur);
  }

  destroy() {
    this.ended.abort();
    Object.values(this.timers).forEach(clearTimeout);
  }

  later(name, action, wait) {
    clearTimeout(this.timers[name]);
    this.timers[name] = setTimeout(action, wait);
  }

  /** Where an event is: pixels in the cell, fractions of the plot. */
  where(event) {
    const { left, top } = this.view.plot.getBoundingClientRect(),
      { box } = this.view.picture;
    const px = event.clientX - left,
      py = event.clientY - top;
    return { px, py, fx: (px - box.left) / box.width, fy: 1 - (py - box.top) / box.height };
  }

  get handles() {
    return this.view.marks.filter((mark) => mark.handle);
  }

  /** Fractions of a mark with a handle; the axis a rule does not have is NaN. */
  placeOf(mark) {
    const { x, y } = this.view.scales,
      held = this.view.held(mark);
    if (mark.kind === "point") return [x.place(held?.x ?? mark.x), y.place(held?.y ?? mark.y)];
    const at = this.view.scales[mark.axis].place(held?.[mark.axis] ?? mark.at);
    return mark.axis === "x" ? [at, NaN] : [NaN, at];
  }

  handleNear({ fx, fy }) {
    const { box } = this.view.picture;
    const apart = (mark) => {
      const [mx, my] = this.placeOf(mark);
      const dx = Number.isNaN(mx) ? 0 : (mx - fx) * box.width,
        dy = Number.isNaN(my) ? 0 : (my - fy) * box.height;
      return Number.isNaN(mx) && Number.isNaN(my) ? Infinity : Math.hypot(dx, dy);
    };
    const near = this.handles.filter((mark) => apart(mark) <= NEAR_HANDLE + (mark.kind === "point" ? 4 : 0));
    near.sort((one, other) => (other.kind === "point") - (one.kind === "point") || apart(one) - apart(other));
    return near[0] || null;
  }

  press(event) {
    if (event.button !== 0 || !this.view.picture) return;
    const place = this.where(event);
    this.pressed = { ...place, mark: this.handleNear(place), moving: false };
    try {
      this.view.plot.setPointerCapture(event.pointerId);
    } catch {
      // a pointer that is already gone cannot be captured; the press then ends with the next release
    }
  }

  move(event) {
    if (!this.view.picture) return;
    const place = this.where(event),
      { pressed } = this;
    if (!pressed) return this.hover(place);
    pressed.moving ||= Math.hypot(place.px - pressed.px, place.py - pressed.py) > CLICK_SLACK;
    if (!pressed.moving) return;
    if (this.cursor) this.leave(); // a read-out that stays behind would cover what is dragged
    if (pressed.mark) this.drag(pressed.mark, place, "drag");
    else this.showZoomBox(pressed, place);
  }

  release(event) {
    const { pressed } = this;
    this.pressed = null;
    if (!pressed) return;
    const place = this.where(event);
    if (!pressed.moving) return this.click(place, pressed.mark);
    if (pressed.mark) this.drag(pressed.mark, place, "drop");
    else this.zoomToBox(pressed, place);
  }

  cancel() {
    if (this.pressed?.mark && this.pressed.moving) this.view.page.letGo(this.view);
    this.pressed = null;
    this.view.zoomBox.style.display = "none";
  }

  /** A double click resets a zoomed chart, so there a click waits until it is certain to be single. */
  click(place, mark) {
    if (!(place.fx >= 0 && place.fx <= 1 && place.fy >= 0 && place.fy <= 1)) return;
    const tell = () => this.tell("click", mark?.handle ?? null, place);
    if (this.zoomed) this.later("click", tell, DOUBLE_CLICK_WAIT);
    else tell();
  }

  get zoomed() {
    return Boolean(this.view.scales.x.view || this.view.scales.y.view);
  }

  tell(kind, handle, place) {
    const { x, y } = this.view.scales;
    const event = { kind, handle, x: x.value(clampFraction(place.fx)), y: y.value(clampFraction(place.fy)) };
    if (Number.isFinite(event.x) && Number.isFinite(event.y)) this.view.page.tell(this.view, event);
  }

  /** The mark follows the pointer at once, within the plot; Python hears of it. */
  drag(mark, place, kind) {
    const { x, y } = this.view.scales;
    const inPlot = { fx: clampFraction(place.fx), fy: clampFraction(place.fy) };
    this.view.holds.set(mark.handle, { x: x.value(inPlot.fx), y: y.value(inPlot.fy) });
    this.tell(kind, mark.handle, inPlot);
    this.view.page.wake();
  }

  showZoomBox(from, to) {
    const { box } = this.view.picture;
    const [left, right] = [from.fx, to.fx].map((f) => box.left + clampFraction(f) * box.width).sort((a, b) => a - b);
    const [top, bottom] = [from.fy, to.fy]
      .map((f) => box.top + (1 - clampFraction(f)) * box.height)
      .sort((a, b) => a - b);
    const size = { left, top, width: right - left, height: bottom - top };
    const pixels = Object.entries(size).map(([name, value]) => [name, `${value}px`]);
    Object.assign(this.view.zoomBox.style, Object.fromEntries(pixels), { display: "block" });
  }

  /** A thin box zooms along its long side only. */
  zoomToBox(from, to) {
    this.view.zoomBox.style.display = "none";
    const { box } = this.view.picture;
    for (const [name, a, b, size] of [
      ["x", from.fx, to.fx, box.width],
      ["y", from.fy, to.fy, box.height],
    ]) {
      const [low, high] = [clampFraction(a), clampFraction(b)].sort((one, other) => one - other);
      if ((high - low) * size >= THIN_BOX) this.view.scales[name].zoomTo(low, high);
    }
    this.view.page.wake();
  }

  wheel(event) {
    const focused = this.view.plot.getRootNode().activeElement === this.view.plot;
    if (!(event.ctrlKey || focused) || !this.view.picture) return; // a page full of charts must still scroll
    event.preventDefault();
    const place = this.where(event),
      factor = Math.exp(Math.sign(event.deltaY) * 0.18);
    this.zoom(place, factor, event.shiftKey ? ["x"] : event.altKey ? ["y"] : ["x", "y"]);
  }

  zoom({ fx, fy }, factor, axes = ["x", "y"]) {
    if (axes.includes("x")) this.view.scales.x.zoomAbout(clampFraction(fx), factor);
    if (axes.includes("y")) this.view.scales.y.zoomAbout(clampFraction(fy), factor);
    this.view.page.wake();
  }

  reset() {
    clearTimeout(this.timers.click);
    this.view.scales.x.view = this.view.scales.y.view = null;
    this.view.page.wake();
  }

  hover(place) {
    this.view.plot.style.cursor = this.handleNear(place) ? "grab" : "crosshair";
    this.curve = null;
    this.cursor =
      place.fx >= 0 && place.fx <= 1 && place.fy >= 0 && place.fy <= 1 ? { fx: place.fx, fy: place.fy } : null;
    this.refresh();
  }

  leave() {
    if (!this.pressed) this.blur();
  }

  blur() {
    this.dropMoved();
    this.cursor = this.curve = null;
    this.refresh();
  }

  /** Shows the read-out where the cursor is, with the values of this moment. */
  refresh() {
    const { reading, dot, picture } = this.view;
    const shown = this.cursor && picture ? "block" : "none";
    reading.style.display = dot.style.display = shown;
    if (shown === "none") return;
    const { rows, fx, fy } = readAt(this.view, this.cursor.fx, this.cursor.fy, this.curve);
    const text = rows.join("\n");
    if (reading.textContent !== text) reading.textContent = text;
    const x = picture.X(fx),
      y = picture.Y(fy),
      width = this.view.width,
      height = this.view.page.height;
    dot.style.transform = `translate(${x}px, ${y}px)`;
    const side =
      x > width / 2 ? { left: "auto", right: `${width - x + 12}px` } : { left: `${x + 12}px`, right: "auto" };
    const level =
      y > height / 2 ? { top: "auto", bottom: `${height - y + 12}px` } : { top: `${y + 12}px`, bottom: "auto" };
    Object.assign(reading.style, side, level);
  }

  key(event) {
    if (!this.view.picture) return;
    const arrow = ARROWS[event.key],
      start = this.cursor || { fx: 0.5, fy: 0.5 };
    if (arrow && event.shiftKey) this.moveHandle(arrow);
    else if (arrow) this.moveCursor(arrow, event.ctrlKey);
    else if (event.key === "+" || event.key === "=") this.zoom(start, 0.8);
    else if (event.key === "-") this.zoom(start, 1.25);
    else if (event.key === "0" || event.key === "Escape") this.reset();
    else if (event.key === "Enter") this.tell("click", null, start);
    else if (event.key === "h" || event.key === "H") this.chooseHandle();
    else return;
    event.preventDefault();
    event.stopPropagation();
  }

  /** Left and right go along a curve, up and down to the next curve; over a map the cursor goes freely. */
  moveCursor([dx, dy], fine) {
    const lines = this.view.marks.filter((mark) => mark.kind === "line"),
      { box } = this.view.picture;
    const step = fine ? 1 / box.width : 1 / 60;
    const from = this.cursor || { fx: 0.5, fy: 0.5 };
    this.cursor = { fx: clampFraction(from.fx + dx * step), fy: from.fy };
    if (this.view.map || !lines.length) this.cursor.fy = clampFraction(from.fy + dy * step);
    else this.followCurve(lines, dy);
    this.refresh();
    this.say();
  }

  followCurve(lines, dy) {
    const at = lines.findIndex((mark) => mark.key === this.curve);
    this.curve = lines[at < 0 ? 0 : (at - dy + lines.length) % lines.length].key;
    const mark = lines.find((line) => line.key === this.curve),
      { x, y } = this.view.scales;
    let nearest = Infinity;
    for (let i = 0; i < mark.x.length; i++) {
      const apart = Math.abs(x.fraction(mark.x[i]) - this.cursor.fx),
        fy = y.fraction(mark.y[i]);
      if (apart < nearest && fy >= 0 && fy <= 1) [nearest, this.cursor.fy] = [apart, fy];
    }
  }

  say(words) {
    this.later(
      "say",
      () => {
        this.view.spoken.textContent = words || this.view.reading.textContent;
      },
      words ? 0 : 400,
    );
  }

  chooseHandle() {
    if (!this.handles.length) return this.say("This chart has no handle.");
    this.chosen = (this.chosen + 1) % this.handles.length;
    const mark = this.handles[this.chosen];
    this.say(`Shift and arrows move ${mark.label || mark.handle}.`);
  }

  moveHandle([dx, dy]) {
    const mark = this.handles[this.chosen % (this.handles.length || 1)];
    if (!mark) return this.say("This chart has no handle.");
    const [fx, fy] = this.placeOf(mark).map((at) => (Number.isNaN(at) ? 0.5 : at));
    this.moved = { mark, place: { fx: fx + dx / 100, fy: fy + dy / 100 } };
    this.drag(mark, this.moved.place, "drag");
  }

  keyUp(event) {
    if (event.key === "Shift") this.dropMoved();
  }

  dropMoved() {
    if (!this.moved) return;
    const { mark, place } = this.moved;
    this.moved = null;
    this.drag(mark, place, "drop");
  }
}
