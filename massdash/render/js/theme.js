/* Colours for the paper the page has: read from the page itself, so that every host's dark theme works. */

const LIGHT = { paper: "#ffffff", text: "#222222", grid: "rgba(0,0,0,.13)", shade: "rgba(90,90,90,.13)" };
const DARK = { paper: "#111111", text: "#e4e4e4", grid: "rgba(255,255,255,.16)", shade: "rgba(190,190,190,.17)" };

const channels = (colour) => (colour.match(/[\d.]+/g) || []).map(Number);

/** The first background behind an element that is not see-through; white when there is none. */
function paperBehind(element) {
  for (let node = element, depth = 0; node && depth < 200; node = node.parentElement, depth++) {
    const colour = getComputedStyle(node).backgroundColor;
    const [red, green, blue, alpha = 1] = channels(colour);
    if (blue !== undefined && alpha > 0.5) return { colour, bright: 0.299 * red + 0.587 * green + 0.114 * blue > 110 };
  }
  return { colour: LIGHT.paper, bright: true };
}

function readTheme(element) {
  const { colour, bright } = paperBehind(element);
  const base = bright ? LIGHT : DARK;
  const pick = (style) => (bright ? [style.light, style.light_ink] : [style.dark, style.dark_ink]);
  const styles = STYLES.map((style) => {
    const [line, ink] = pick(style);
    return { line, ink, dash: style.dash };
  });
  return { ...base, paper: colour, dark: !bright, styles };
}

/** 256 colours as the 32-bit numbers an image takes. */
function packedTable(name) {
  const rgb = COLOUR_TABLES[name];
  return Uint32Array.from(
    { length: 256 },
    (_, i) => (255 << 24) | (rgb[3 * i + 2] << 16) | (rgb[3 * i + 1] << 8) | rgb[3 * i],
  );
}

const PACKED_TABLES = { sequential: packedTable("sequential"), diverging: packedTable("diverging") };
