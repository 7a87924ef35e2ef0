// Runs in the page: polling it from outside, or moving the mouse from outside, would disturb what is measured.
// Returns {steps: [[ms to the paint, ms with one more frame], ...], drag: {...} or null when none was wished}.
async ({ label, steps, dragSeconds, movesPerSecond }) => {
  const slider = [...document.querySelectorAll(".massdash-field-slider")].find((node) => node.ariaLabel.startsWith(label));
  const charts = document.querySelector(".massdash-charts");
  const pause = (ms) => new Promise((resolve) => setTimeout(resolve, ms));
  const frame = () => Number(charts.dataset.frame);

  // A message posted while a frame is made arrives when the frame has been painted.
  const task = () => new Promise((resolve) => {
    const { port1, port2 } = new MessageChannel();
    port1.onmessage = resolve;
    port2.postMessage(0);
  });
  const nextFrame = () => new Promise((resolve) => requestAnimationFrame(resolve));

  function move(position) {
    slider.value = position;
    slider.dispatchEvent(new Event("input", { bubbles: true }));
  }

  async function step(position) {
    const before = frame(), start = performance.now();
    const painted = new Promise((resolve) => {
      const seen = () => {
        if (frame() <= before) return;
        charts.removeEventListener("massdash:painted", seen);
        resolve(task().then(() => performance.now()));
      };
      charts.addEventListener("massdash:painted", seen);
    });
    move(position);
    const first = await painted;
    await nextFrame().then(task);
    return [first - start, performance.now() - start];
  }

  async function drag() {
    const low = slider.max * 0.3, high = slider.max * 0.7, total = Math.round(dragSeconds * movesPerSecond);
    const frames = [];
    const seen = () => frames.push([performance.now(), frame()]);
    charts.addEventListener("massdash:painted", seen);
    slider.dispatchEvent(new PointerEvent("pointerdown", { bubbles: true, button: 0 }));
    const start = performance.now();
    for (let i = 1; i <= total; i++) {
      const wait = start + (i * 1000) / movesPerSecond - performance.now();
      if (wait > 0) await pause(wait);
      move(low + (high - low) * (i / total));
    }
    const end = performance.now();
    window.dispatchEvent(new PointerEvent("pointerup", { bubbles: true, button: 0 }));
    await pause(1500);
    charts.removeEventListener("massdash:painted", seen);
    const during = frames.filter(([time]) => time <= end);
    const different = new Set(during.map(([, number]) => number)).size;
    return {
      seconds: (end - start) / 1000,
      moves: total,
      updates: different,
      inOrder: frames.every(([, number], i) => i === 0 || number >= frames[i - 1][1]),
      settled: frames.length ? frames.at(-1)[0] - end : null,
    };
  }

  const found = [];
  for (let i = 0; i < steps; i++) {
    found.push(await step(slider.max * (0.3 + (0.4 * i) / steps)));
    await pause(350); // what follows a pause of the reader is over before the next step
  }
  return { steps: found, drag: dragSeconds ? await drag() : null };
}
