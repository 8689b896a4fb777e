const SUPERSCRIPTS = "⁰¹²³⁴⁵⁶⁷⁸⁹";

/** A power of ten in plain text: `10⁻⁸`. */
export function powerOfTen(exponent: number): string {
  const digits = [...String(Math.abs(exponent))].map((digit) => SUPERSCRIPTS[Number(digit)]).join("");
  return `10${exponent < 0 ? "⁻" : ""}${digits}`;
}

/** A finite number other than 0 with so many digits and its power of ten: `3.2 × 10⁻⁷`; `10⁻⁸` where 1 is all there is. */
export function inPowers(value: number, digits: number): string {
  const [coefficient, exponent] = value.toExponential(digits - 1).split("e");
  const ten = powerOfTen(Number(exponent));
  return Number(coefficient) === 1 && digits === 1 ? ten : `${coefficient} × ${ten}`;
}
