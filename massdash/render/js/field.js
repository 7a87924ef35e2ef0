/* One number: slider, typed entry, unit, range, message. Python decides what is accepted; this shows it. */

const LOG_POSITIONS = 1000;

function make(tag, className, parent, attributes = {}) {
  const node = document.createElement(tag);
  node.className = className;
  for (const [name, value] of Object.entries(attributes)) node.setAttribute(name, value);
  parent.append(node);
  return node;
}

/** A number as it can be typed: 120000, 1.2e7, 3e-5; every digit it has. */
function typedForm(value) {
  const size = Math.abs(value);
  if (value === 0 || (size >= 1e-3 && size < 1e6)) return String(value);
  return value.toExponential().replace("e+", "e");
}

/** Slider positions 0..count <-> values, linear or logarithmic, in round values. */
class Track {
  constructor(get) {
    Object.assign(this, {
      minimum: get("minimum"),
      maximum: get("maximum"),
      log: get("scale") === "log",
      digits: get("digits"),
    });
    this.step = get("step") || (this.maximum - this.minimum) / LOG_POSITIONS;
    const positions = Math.round((this.maximum - this.minimum) / this.step);
    this.count = this.log ? LOG_POSITIONS : Math.max(1, Math.min(100000, positions));
  }

  position(value) {
    const { minimum, maximum, log } = this;
    const part = log
      ? Math.log(value / minimum) / Math.log(maximum / minimum)
      : (value - minimum) / (maximum - minimum);
    return part * this.count;
  }

  value(position) {
    const { minimum, maximum, log, step, digits } = this,
      part = position / this.count;
    if (part <= 0) return minimum;
    if (part >= 1) return maximum;
    const exact = log
      ? minimum * (maximum / minimum) ** part
      : minimum + Math.round((part * (maximum - minimum)) / step) * step;
    const value = Number(exact.toPrecision(log ? digits : 12));
    return Math.min(maximum, Math.max(minimum, value)); // rounding must not leave the range
  }
}

class Field {
  constructor(model, host) {
    Object.assign(this, {
      model,
      sent: 0,
      held: false,
      // Each field loads its own copy of this module, so that a counter would give all of them the same name.
      id: `massdash-field-${Math.random().toString(36).slice(2)}`,
      ended: new AbortController(),
    });
    this.get = (name) => model.get(name);
    this.build(host);
    this.bind();
    this.changed = () => this.show();
    model.on("change", this.changed);
    this.show();
  }

  build(host) {
    const { id } = this;
    this.root = make("div", "massdash-field", host, {
      role: "group",
      "aria-labelledby": `${id}-label`,
      "data-lm-suppress-shortcuts": "true",
    });
    const head = make("div", "massdash-field-head", this.root);
    this.label = make("label", "massdash-field-label", head, { id: `${id}-label`, for: `${id}-text` });
    const described = `${id}-range ${id}-message`;
    this.text = make("input", "massdash-field-text", head, {
      id: `${id}-text`,
      type: "text",
      inputmode: "decimal",
      autocomplete: "off",
      spellcheck: "false",
      maxlength: "40",
      "aria-describedby": described,
    });
    this.unit = make("span", "massdash-field-unit", head);
    this.slider = make("input", "massdash-field-slider", this.root, {
      type: "range",
      min: "0",
      step: "any",
      "aria-describedby": described,
    });
    const foot = make("div", "massdash-field-foot", this.root);
    this.choice = make("label", "massdash-field-choice", foot);
    this.none = make("input", "massdash-field-none", this.choice, { type: "checkbox" });
    this.noneText = make("span", "", this.choice);
    this.range = make("span", "massdash-field-range", foot, { id: `${id}-range` });
    this.reset = make("button", "massdash-field-reset", foot, { type: "button" });
    this.reset.textContent = "reset";
    this.help = make("div", "massdash-field-help", this.root);
    this.message = make("div", "massdash-field-message", this.root, {
      id: `${id}-message`,
      role: "status",
      "aria-live": "polite",
    });
  }

  bind() {
    const on = (node, name, handle) => node.addEventListener(name, handle.bind(this), { signal: this.ended.signal });
    on(this.slider, "pointerdown", this.hold);
    on(window, "pointerup", this.release);
    on(window, "pointercancel", this.release);
    on(this.slider, "input", this.slide);
    on(this.slider, "keydown", this.stepByKey);
    on(this.text, "change", this.commit);
    on(this.text, "keydown", this.typeKey);
    on(this.none, "change", () => this.send(this.none.checked ? "none" : "some"));
    on(this.reset, "click", () => this.send("reset"));
  }

  destroy() {
    this.model.off("change", this.changed);
    this.ended.abort();
    this.root.remove();
  }

  /** The newest entry wins: the model keeps one message in flight and then sends the last. */
  send(kind, value = null) {
    this.sent += 1;
    this.model.set("entry", { kind, value, dragging: this.held, seq: this.sent });
    this.model.save_changes();
  }

  hold(event) {
    if (event.button === 0 && !this.slider.disabled) this.held = true;
  }

  slide() {
    const value = this.track.value(Number(this.slider.value));
    this.text.value = typedForm(value);
    this.speak(value);
    this.last = value;
    this.send("number", value);
  }

  release() {
    if (!this.held) return;
    this.held = false;
    this.send("number", this.last ?? this.get("number"));
  }

  /** One key press is one round step; the browser's own steps know nothing of round values. */
  stepByKey(event) {
    const steps = { ArrowLeft: -1, ArrowDown: -1, ArrowRight: 1, ArrowUp: 1, PageDown: -10, PageUp: 10 }[event.key];
    if (steps === undefined || event.altKey || event.ctrlKey || event.metaKey) return;
    event.preventDefault();
    const size = (this.track.count / 100) * (event.shiftKey ? 0.1 : 1);
    const change = this.track.log ? size : Math.max(1, size); // a linear slider moves a whole step at least
    this.slider.value = Number(this.slider.value) + steps * change;
    this.slide();
  }

  /** Notebooks swallow the change that Enter makes in a plain page, so it is taken here too; what was sent is not sent
      again when the field loses its focus. */
  commit() {
    if (this.text.value === this.committed) return;
    this.committed = this.text.value;
    this.send("text", this.text.value);
  }

  typeKey(event) {
    if (event.key === "Enter") this.commit();
    if (event.key === "Escape") this.text.value = typedForm(this.get("number"));
  }

  /** Assistive tools hear the value, not the position of the thumb. */
  speak(value) {
    const unit = this.get("unit_shown"),
      { minimum, maximum } = this.track;
    const told = {
      valuemin: minimum,
      valuemax: maximum,
      valuenow: value,
      valuetext: formatNumber(value, 6) + (unit && ` ${unit}`),
    };
    for (const [name, said] of Object.entries(told)) this.slider.setAttribute(`aria-${name}`, String(said));
  }

  /** Shows what Python has, except that a value on its way from here is not undone by an older answer. */
  show() {
    this.track = new Track(this.get);
    this.showWords();
    const waiting = this.held || this.get("answered") < this.sent;
    if (!waiting) this.showNumber();
    this.showMessage();
  }

  showWords() {
    const [label, unit, help] = ["label", "unit_shown", "help"].map(this.get),
      { minimum, maximum } = this.track;
    this.label.textContent = label;
    this.unit.textContent = unit;
    this.slider.setAttribute("aria-label", unit ? `${label} in ${unit}` : label);
    this.range.textContent = `${formatNumber(minimum)} to ${formatNumber(maximum)}${unit ? " " + unit : ""}`;
    this.help.textContent = help;
    this.help.hidden = !help;
    this.choice.hidden = !this.get("optional");
    this.noneText.textContent = this.get("none_label");
    this.showReset(label);
  }

  showReset(label) {
    const value = this.get("default"),
      unit = this.get("unit_shown");
    const words = value === null ? this.get("none_label") : `${formatNumber(value, 6)} ${unit}`.trim();
    this.reset.title = `back to ${words}`;
    this.reset.setAttribute("aria-label", `${label}: back to ${words}`);
    this.reset.hidden = value === null && !this.get("optional");
    this.reset.disabled = this.get("value") === value;
  }

  showNumber() {
    const none = this.get("value") === null,
      number = this.get("number");
    this.none.checked = none;
    this.slider.disabled = this.text.disabled = none;
    this.slider.max = String(this.track.count);
    this.slider.value = String(this.track.position(number));
    this.text.value = this.committed = typedForm(number);
    this.last = number;
    this.speak(number);
  }

  showMessage() {
    const message = this.get("message");
    if (this.message.textContent !== message) this.message.textContent = message;
    this.root.classList.toggle("massdash-field-refused", Boolean(message));
    this.text.setAttribute("aria-invalid", String(Boolean(message)));
  }
}

function render({ model, el }) {
  const field = new Field(model, el);
  return () => field.destroy();
}

export default { render };
