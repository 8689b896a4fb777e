import type { Algebra } from "./algebra.ts";

export interface Complex {
  readonly re: number;
  readonly im: number;
}

const polar = (radius: number, angle: number): Complex => ({
  re: radius * Math.cos(angle),
  im: radius * Math.sin(angle),
});
const power = (a: Complex, exponent: number): Complex =>
  polar(Math.hypot(a.re, a.im) ** exponent, Math.atan2(a.im, a.re) * exponent);

export const complex: Algebra<Complex> = {
  of: (re) => ({ re, im: 0 }),
  add: (a, b) => ({ re: a.re + b.re, im: a.im + b.im }),
  sub: (a, b) => ({ re: a.re - b.re, im: a.im - b.im }),
  mul: (a, b) => ({ re: a.re * b.re - a.im * b.im, im: a.re * b.im + a.im * b.re }),
  div: (a, b) => {
    const size = b.re * b.re + b.im * b.im;
    return { re: (a.re * b.re + a.im * b.im) / size, im: (a.im * b.re - a.re * b.im) / size };
  },
  scale: (a, factor) => ({ re: a.re * factor, im: a.im * factor }),
  sqrt: (a) => power(a, 0.5),
  exp: (a) => polar(Math.exp(a.re), a.im),
  sin: (a) => ({ re: Math.sin(a.re) * Math.cosh(a.im), im: Math.cos(a.re) * Math.sinh(a.im) }),
  power,
  value: (a) => a.re,
};
