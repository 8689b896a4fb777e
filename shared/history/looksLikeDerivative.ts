import { pathWords } from "./pathWords.ts";

const DERIVATIVE_WORDS: ReadonlySet<string> = new Set([
  ...["derivative", "derivatives", "deriv", "derivs", "differentiated", "partial", "partials"],
  ...["gradient", "gradients", "grad", "grads", "jacobian", "jacobians", "jac", "hessian", "hessians"],
  ...["adjoint", "adjoints", "adj", "tangent", "tangents", "tlm", "jvp", "vjp"],
  ...["sensitivity", "sensitivities", "sens", "dual", "duals", "autodiff"],
]);

/** Endings that source transformation tools give to files: `_d` and `_dv` tangent, `_b` and `_bv` adjoint. */
const GENERATED_ENDING = /[^/\\._]_(?:d|dv|b|bv)\.\w+$/i;

/** True where a path's words, or the ending of its file's name, say that it holds derivative code. Common practice. */
export function looksLikeDerivative(path: string): boolean {
  return GENERATED_ENDING.test(path) || pathWords(path).some((word) => DERIVATIVE_WORDS.has(word));
}
