/* One chart: its elements in the page, its scales and marks of the moment, and when it is painted. */

const HOW_TO =
  "Hover to read values. Drag a box to zoom; the wheel zooms while the chart has focus or with Ctrl; " +
  "double click, 0 or Escape resets. Keys: arrows move the read-out, + and − zoom, Enter clicks, " +
  "Shift and arrows move a handle, H picks the next.";
const MOST_PIXELS = 16e6;

function element(tag, className, parent, attributes = {}) {
  const node = document.createElement(tag);
  node.className = className;
  for (const [name, value] of Object.entries(attributes)) node.setAttribute(name, value);
  parent.append(node);
  return node;
}

let charts = 0;

class ChartView {
  constructor(grid, key, page) {
    Object.assign(this, {
      key,
      page,
      marks: [],
      map: null,
      prepared: null,
      holds: new Map(),
      width: 0,
      legendText: "",
    });
    this.helpId = `massdash-help-${++charts}`;
    this.build(grid);
    this.watcher = new ResizeObserver(([entry]) => this.resize(entry.contentRect.width));
    this.watcher.observe(this.plot);
    this.input = new ChartInput(this);
  }

  build(grid) {
    this.cell = element("figure", "massdash-cell", grid, { "data-chart": this.key });
    this.head = element("figcaption", "massdash-title", this.cell);
    this.heading = element("span", "massdash-heading", this.head);
    element("span", "massdash-how", this.head, { title: HOW_TO, "aria-hidden": "true" }).textContent = "?";
    this.legend = element("div", "massdash-legend", this.cell);
    this.plot = element("div", "massdash-plot", this.cell, {
      tabindex: "0",
      role: "img",
      "aria-describedby": this.helpId,
      "data-lm-suppress-shortcuts": "true", // else JupyterLab takes the keys for its own shortcuts
    });
    this.canvas = element("canvas", "massdash-canvas", this.plot, { "aria-hidden": "true" });
    this.zoomBox = element("div", "massdash-box", this.plot);
    this.dot = element("div", "massdash-dot", this.plot);
    this.reading = element("div", "massdash-read", this.plot, { "aria-hidden": "true" });
    this.help = element("div", "massdash-help", this.cell, { id: this.helpId });
    this.help.textContent = HOW_TO;
    this.spoken = element("div", "massdash-spoken", this.cell, { "aria-live": "polite" });
  }

  destroy() {
    this.watcher.disconnect();
    this.input.destroy();
    this.cell.remove();
  }

  get theme() {
    return this.page.theme;
  }

  /** Takes the structure when it changed; zoom survives unless an axis is another one now. */
  setStructure(structure) {
    this.structure = structure;
    const map = structure.marks.find((mark) => mark.kind === "map");
    const axes = { x: structure.x, y: structure.y, ...(map ? { z: map.axis } : {}) };
    const kept = (name, axis) => {
      const old = this.scales?.[name];
      return old && old.scale === axis.scale && old.label === axis.label && old.unit === axis.unit
        ? old
        : new Scale(axis);
    };
    this.scales = Object.fromEntries(Object.entries(axes).map(([name, axis]) => [name, kept(name, axis)]));
  }

  setMoment(moment, columns) {
    this.scales.x.setMoment(moment.x);
    this.scales.y.setMoment(moment.y);
    this.marks = this.structure.marks.map((mark, i) => wholeMark(mark, moment.marks[i], columns));
    this.map = this.marks.find((mark) => mark.kind === "map") || null;
    if (this.map) {
      this.scales.z.setMoment(moment.marks[this.marks.indexOf(this.map)].axis);
      if (!stillPrepared(this.prepared, this.map, this.scales.z)) this.prepared = prepareMap(this.map, this.scales.z);
    }
    if (this.heading.textContent !== moment.title) this.heading.textContent = moment.title;
    this.describe(moment);
  }

  describe({ title, alt }) {
    const { x, y } = this.scales;
    const said = alt || `${title}: ${y.label} against ${x.label}.`;
    if (this.plot.getAttribute("aria-label") !== said) this.plot.setAttribute("aria-label", said);
  }

  /** Where the reader holds a mark that is being dragged; Python's place takes over after the drop. */
  held(mark) {
    return mark.handle ? this.holds.get(mark.handle) : undefined;
  }

  resize(width) {
    this.width = Math.min(Math.floor(width), 4000);
    this.page.wake();
  }

  sizeCanvas(height) {
    const { canvas, width } = this;
    const dense = Math.min(window.devicePixelRatio || 1, Math.sqrt(MOST_PIXELS / (width * height)));
    const [across, down] = [Math.round(width * dense), Math.round(height * dense)];
    if (canvas.width !== across || canvas.height !== down) {
      Object.assign(canvas, { width: across, height: down });
      Object.assign(canvas.style, { width: `${width}px`, height: `${height}px` });
    }
    const context = canvas.getContext("2d", { alpha: false });
    context.setTransform(dense, 0, 0, dense, 0, 0);
    return context;
  }

  /** Whether anything was painted: a hidden chart, or one without room yet, is not. */
  paint(height) {
    if (!(this.width > 60)) return false;
    this.picture = paintChart(this, this.sizeCanvas(height), this.width, height);
    this.fillLegend(this.picture.legend);
    this.input.refresh();
    return true;
  }

  /** Texts that found no place in the plot, in one line under the title; it keeps its height once it was needed. */
  fillLegend(entries) {
    const text = JSON.stringify(entries);
    if (text === this.legendText) return;
    this.legendText = text;
    this.legend.textContent = "";
    this.legend.classList.toggle(
      "massdash-used",
      entries.length > 0 || this.legend.classList.contains("massdash-used"),
    );
    for (const { text: said, colour, dash } of entries) {
      const item = element("span", "massdash-entry", this.legend);
      if (dash) element("span", "massdash-swatch", item).style.borderTop = `2px ${swatchStyle(dash)} ${colour}`;
      item.append(said);
    }
  }
}

function swatchStyle(dash) {
  if (!dash.length) return "solid";
  return dash[0] > 2 ? "dashed" : "dotted";
}
