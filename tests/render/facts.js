/* What a test wants to know of each painted chart; evaluated in the page. */
() => {
  const ruler = document.createElement("canvas").getContext("2d");
  ruler.font = "12px 'DejaVu Sans', 'Segoe UI', system-ui, sans-serif";
  const width = (text) => ruler.measureText(text).width;
  const height = () => 12;

  /** Whether there is blue ink within two pixels: the first style is blue, everything else here is grey. */
  const inkReader = ({ canvas, width: across }) => {
    const dense = canvas.width / across;
    const pixels = canvas.getContext("2d").getImageData(0, 0, canvas.width, canvas.height).data;
    return (x, y) => {
      for (let dx = -2; dx <= 2; dx++) for (let dy = -2; dy <= 2; dy++) {
        const at = 4 * (Math.round((y + dy) * dense) * canvas.width + Math.round((x + dx) * dense));
        if (pixels[at + 3] > 100 && pixels[at + 2] - pixels[at] > 60) return true;
      }
      return false;
    };
  };

  const axis = (scale, ticks, length, size) => ({
    home: scale.home, note: scale.note, title: scale.title(),
    ticks: ticks.map((tick) => ({ ...tick, half: size(tick.text) / 2, pixel: tick.at * length })),
  });

  return views.map((view) => {
    const { picture, scales } = view, { box } = picture, inked = inkReader(view);
    const line = view.marks.find((mark) => mark.kind === "line" && mark.style === 0);
    const points = Array.from(line.x, (t, i) => [picture.X(scales.x.fraction(t)), picture.Y(scales.y.fraction(line.y[i]))]);
    const heights = Array.from({ length: 60 }, (_, k) => box.top + 2 + (k * (box.height - 4)) / 59);
    return {
      x: axis(scales.x, picture.xTicks, box.width, width),
      y: axis(scales.y, picture.yTicks, box.height, height),
      points: points.map(([x, y]) => (Number.isFinite(x + y) ? { x, y, inked: inked(x, y) } : null)),
      column: points.map(([x]) => heights.some((y) => inked(x, y))),
      written: picture.texts.written,
      legend: view.legend.textContent,
      canvas: [view.width, view.canvas.clientHeight],
      label: view.plot.getAttribute("aria-label"),
    };
  });
}
