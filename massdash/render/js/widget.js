/* The widget: frames in, one paint per animation frame, events out. */

const DROP_WAIT = 1000;

class Page {
  constructor(model, host) {
    Object.assign(this, {
      model,
      host,
      views: [],
      queued: false,
      taken: -1,
      sent: 0,
      fresh: true,
      theme: readTheme(host),
    });
    this.root = element("div", "massdash-charts", host);
    this.root.page = this; // for tests and the console
    this.ended = new AbortController();
    this.listen();
    this.wake();
  }

  listen() {
    const { model } = this,
      fresh = () => {
        this.fresh = true;
        this.wake();
      },
      wake = () => this.wake();
    this.subscriptions = [
      ["change:structure", fresh],
      ["change:frame", fresh],
      ["change:columns", wake],
      ["change:height", wake],
      ["change:fill", wake],
    ];
    this.subscriptions.forEach(([name, handle]) => model.on(name, handle));
    const restyle = () => {
      this.themeSure = false; // the old one serves until the next paint
      this.wake();
    };
    this.pageWatcher = new MutationObserver(restyle);
    for (const node of [document.body, document.documentElement]) this.pageWatcher.observe(node, { attributes: true });
    addEventListener("resize", wake, { signal: this.ended.signal });
    matchMedia("(prefers-color-scheme: dark)").addEventListener("change", restyle, { signal: this.ended.signal });
  }

  destroy() {
    this.subscriptions.forEach(([name, handle]) => this.model.off(name, handle));
    this.pageWatcher.disconnect();
    this.ended.abort();
    this.views.forEach((view) => view.destroy());
    this.root.remove();
    this.gone = true;
  }

  /** Of one chart: as Python says, or such that two rows and what stands around them fill the window. */
  get height() {
    const most = innerHeight < 1200 ? 260 : 560; // pixels take time: small machines come with small screens
    if (this.model.get("fill")) return Math.round(Math.max(240, Math.min(most, (innerHeight - 256) / 2)));
    return Math.max(120, Math.min(2000, this.model.get("height") || 300));
  }

  /** Asks for a paint; however often this is called, the page paints once per animation frame. */
  wake() {
    if (this.queued || this.gone) return;
    this.queued = true;
    requestAnimationFrame(() => this.paint());
  }

  paint() {
    this.queued = false;
    if (this.gone) return;
    if (this.fresh) this.takeFrame();
    if (!this.theme || !this.themeSure) this.restyle();
    this.root.style.setProperty("--massdash-columns", this.model.get("columns") || 2);
    const painted = this.views.map((view) => view.paint(this.height));
    if (painted.includes(true)) this.announce();
  }

  /** The number of the frame now on the canvas, for those who wait for it; nothing is said while all is hidden. */
  announce() {
    this.root.dataset.frame = this.taken;
    this.root.dispatchEvent(new CustomEvent("massdash:painted", { bubbles: true, detail: { frame: this.taken } }));
  }

  /** Reads colours from the page; before the widget is in it, only a guess is possible. */
  restyle() {
    this.theme = readTheme(this.host);
    this.themeSure = this.host.isConnected;
    this.root.classList.toggle("massdash-dark", this.theme.dark);
  }

  /** The newest frame, unless a newer one was taken or its structure is still on the way. */
  takeFrame() {
    this.fresh = false;
    const structure = this.model.get("structure"),
      frame = this.model.get("frame");
    if (!(frame.number > this.taken) || !fits(structure, frame)) return;
    if (structure !== this.structure) this.build(structure);
    const columns = readColumns(frame);
    this.views.forEach((view, i) => {
      if (view.dropped && frame.answers >= view.dropped) this.letGo(view);
      view.setMoment(frame.charts[i], columns);
    });
    this.taken = frame.number;
  }

  /** Keeps the charts that stay, with their zoom and focus. */
  build(structure) {
    this.structure = structure;
    const old = new Map(this.views.map((view) => [view.key, view]));
    this.views = structure.charts.map((chart) => {
      const view = old.get(chart.key) || new ChartView(this.root, chart.key, this);
      old.delete(chart.key);
      view.setStructure(chart);
      return view;
    });
    old.forEach((view) => view.destroy());
    const inOrder = this.views.every((view, i) => this.root.children[i] === view.cell);
    if (!inOrder) this.root.append(...this.views.map((view) => view.cell));
  }

  /** Sends an event; the model keeps one message in flight and then sends the newest. */
  tell(view, event) {
    this.sent += 1;
    view.dropped = event.kind === "drop" ? this.sent : 0;
    if (view.dropped) this.waitForAnswer(view, this.sent);
    this.model.set("event", { ...event, chart: view.key, seq: this.sent });
    this.model.save_changes();
  }

  /** Without an answer in time the mark goes back to where Python last had it. */
  waitForAnswer(view, drop) {
    setTimeout(() => {
      if (view.dropped === drop) this.letGo(view);
    }, DROP_WAIT);
  }

  letGo(view) {
    view.holds.clear();
    view.dropped = 0;
    this.wake();
  }
}

function render({ model, el }) {
  const page = new Page(model, el);
  return () => page.destroy();
}

export default { render };
