/* Numbers as text. */

const SUPERSCRIPTS = {
  "-": "⁻",
  0: "⁰",
  1: "¹",
  2: "²",
  3: "³",
  4: "⁴",
  5: "⁵",
  6: "⁶",
  7: "⁷",
  8: "⁸",
  9: "⁹",
};

const superscript = (integer) => String(integer).replace(/./g, (c) => SUPERSCRIPTS[c]);
const withMinus = (text) => text.replace("-", "−");

/** 10**k without rounding: 10 ** -24 is off in the last digit, the literal is not. */
const powerOfTen = (k) => Number(`1e${k}`);

/** 1, 10, 10⁵⁴ */
function powerText(k) {
  if (k === 0) return "1";
  return k === 1 ? "10" : "10" + superscript(k);
}

/** 1.23×10⁵⁴, or plain digits near 1; a number that is not finite reads "–". */
function formatNumber(value, digits = 4) {
  if (!Number.isFinite(value)) return "–";
  if (value === 0) return "0";
  const size = Math.abs(value);
  if (size >= 1e-3 && size < 1e5) return withMinus(String(Number(value.toPrecision(digits))));
  const [mantissa, exponent] = value.toExponential(digits - 1).split("e");
  const power = "10" + superscript(Number(exponent));
  const factor = Number(mantissa);
  if (Math.abs(factor) === 1) return (factor < 0 ? "−" : "") + power;
  return `${withMinus(String(factor))}×${power}`;
}
