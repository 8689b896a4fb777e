/**
 * The operations that the published problems need, so that each residual is written once and runs in real
 * arithmetic (differences) and in complex arithmetic (complex step).
 */
export interface Field<T> {
  of(value: number): T;
  add(a: T, b: T): T;
  sub(a: T, b: T): T;
  mul(a: T, b: T): T;
  div(a: T, b: T): T;
  scale(a: T, factor: number): T;
  exp(a: T): T;
  log(a: T): T;
  sin(a: T): T;
  cos(a: T): T;
  atan(a: T): T;
  sqrt(a: T): T;
  /** Real part, for branches only. */
  re(a: T): number;
}

export const REAL: Field<number> = {
  of: (value) => value,
  add: (a, b) => a + b,
  sub: (a, b) => a - b,
  mul: (a, b) => a * b,
  div: (a, b) => a / b,
  scale: (a, factor) => a * factor,
  exp: Math.exp,
  log: Math.log,
  sin: Math.sin,
  cos: Math.cos,
  atan: Math.atan,
  sqrt: Math.sqrt,
  re: (a) => a,
};

export interface Complex {
  readonly re: number;
  readonly im: number;
}

const complex = (re: number, im: number): Complex => ({ re, im });

/**
 * Complex arithmetic that stays exact to first order in a tiny imaginary part (1e-20 and below): no squares of
 * the imaginary part are subtracted from squares of the real part before a root, and atan uses its derivative form.
 */
export const COMPLEX: Field<Complex> = {
  of: (value) => complex(value, 0),
  add: (a, b) => complex(a.re + b.re, a.im + b.im),
  sub: (a, b) => complex(a.re - b.re, a.im - b.im),
  mul: (a, b) => complex(a.re * b.re - a.im * b.im, a.re * b.im + a.im * b.re),
  div: (a, b) => {
    const d = b.re * b.re + b.im * b.im;
    return complex((a.re * b.re + a.im * b.im) / d, (a.im * b.re - a.re * b.im) / d);
  },
  scale: (a, factor) => complex(a.re * factor, a.im * factor),
  exp: (a) => complex(Math.exp(a.re) * Math.cos(a.im), Math.exp(a.re) * Math.sin(a.im)),
  log: (a) => complex(Math.log(Math.hypot(a.re, a.im)), Math.atan2(a.im, a.re)),
  sin: (a) => complex(Math.sin(a.re) * Math.cosh(a.im), Math.cos(a.re) * Math.sinh(a.im)),
  cos: (a) => complex(Math.cos(a.re) * Math.cosh(a.im), -Math.sin(a.re) * Math.sinh(a.im)),
  atan: (a) => {
    const { re: x, im: y } = a;
    return complex(
      0.5 * Math.atan2(2 * x, 1 - x * x - y * y),
      0.25 * Math.log1p((4 * y) / (x * x + (1 - y) * (1 - y))),
    );
  },
  sqrt: (a) => {
    const root = Math.sqrt((Math.hypot(a.re, a.im) + Math.abs(a.re)) / 2);
    if (root === 0) return complex(0, 0);
    const other = a.im / (2 * root);
    return a.re >= 0 ? complex(root, other) : complex(Math.abs(other), a.im < 0 ? -root : root);
  },
  re: (a) => a.re,
};
