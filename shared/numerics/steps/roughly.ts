const SUPERSCRIPTS = ["⁰", "¹", "²", "³", "⁴", "⁵", "⁶", "⁷", "⁸", "⁹"];

/** A number > 0 as people say it: `6 × 10⁻⁶`, `10⁻⁸`, `0.02`; one significant digit. */
export function roughly(value: number): string {
  if (value === 0) return "0";
  if (!Number.isFinite(value)) return String(value);
  if (value >= 0.01 && value < 9.5) return String(Number(value.toPrecision(1)));
  const [coefficient, power] = value.toExponential(0).split("e");
  const exponent = Number(power);
  const digits = [...String(Math.abs(exponent))].map((digit) => SUPERSCRIPTS[Number(digit)]).join("");
  const ten = `10${exponent < 0 ? "⁻" : ""}${digits}`;
  return coefficient === "1" ? ten : `${coefficient} × ${ten}`;
}

/** A part of a whole: `all entries`, `99 % of the entries`; never rounded to all or none. */
export function shareOf(part: number, whole: number): string {
  if (part >= whole) return "every entry";
  if (part === 0) return "no entry";
  const percent = Math.min(99, Math.max(1, Math.round((100 * part) / whole)));
  return whole < 10 ? `${part} of ${whole} entries` : `${percent} % of the entries`;
}

export function entriesOf(count: number): string {
  if (count === 1) return "one entry";
  return `${String(count).replace(/\B(?=(\d{3})+$)/g, "\u202f")} entries`;
}
