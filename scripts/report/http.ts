import { setTimeout as sleep } from "node:timers/promises";
import { notPosted } from "./exit.ts";

export interface HttpRequest {
  readonly method: "GET" | "POST";
  readonly url: string;
  readonly headers: Readonly<Record<string, string>>;
  readonly body?: Uint8Array;
}

export interface HttpAnswer {
  readonly status: number;
  readonly headers: Headers;
  /** The parsed body, or its text where it is no JSON. */
  readonly body: unknown;
}

export interface Retrying {
  /** Milliseconds in which a request is tried again; 0 tries once. */
  readonly patienceMs: number;
  /** Told before each pause. */
  readonly onRetry: (reason: string, delayMs: number) => void;
}

/** Answers after which the same request may do better. */
const PASSING = new Set([429, 502, 503, 504]);
const FIRST_DELAY_MS = 500;
const LONGEST_DELAY_MS = 30_000;
/** One request may be a large build on a slow line. */
const REQUEST_TIMEOUT_MS = 10 * 60 * 1000;

/**
 * Sends a request, the same bytes each time, until it is answered with something lasting. Pauses double, with jitter so
 * that the jobs of one outage do not come back all at once; where the server gives Retry-After, the first pause follows it.
 * @throws ReportError (not posted) when patience is over.
 */
export async function send(request: HttpRequest, { patienceMs, onRetry }: Retrying): Promise<HttpAnswer> {
  const until = Date.now() + patienceMs;
  for (let attempt = 0; ; attempt += 1) {
    const { answer, reason } = await once(request);
    if (answer && !PASSING.has(answer.status)) return answer;
    const asked = answer ? retryAfterMs(answer.headers.get("retry-after"), Date.now()) : null;
    const delay = asked === null ? backOffMs(attempt, Math.random()) : asked + backOffMs(0, Math.random());
    if (Date.now() + delay > until) throw notPosted(`Gave up after ${attempt + 1} attempts: ${reason}.`);
    onRetry(reason, delay);
    await sleep(delay);
  }
}

interface Outcome {
  readonly answer: HttpAnswer | null;
  readonly reason: string;
}

async function once({ method, url, headers, body }: HttpRequest): Promise<Outcome> {
  try {
    const response = await fetch(url, {
      method,
      headers,
      // A POST that is redirected would arrive as a GET, or with its token at another host.
      redirect: "manual",
      signal: AbortSignal.timeout(REQUEST_TIMEOUT_MS),
      ...(body === undefined ? {} : { body: body as Uint8Array<ArrayBuffer> }),
    });
    const text = await response.text();
    const answer = { status: response.status, headers: response.headers, body: parsed(text) };
    return { answer, reason: `the server answers ${response.status}${detailOf(answer.body)}` };
  } catch (error) {
    return { answer: null, reason: `cannot reach ${new URL(url).origin} (${causeOf(error)})` };
  }
}

function parsed(text: string): unknown {
  try {
    return JSON.parse(text);
  } catch {
    return text;
  }
}

function detailOf(body: unknown): string {
  const detail = typeof body === "object" && body !== null && "detail" in body ? body.detail : null;
  return typeof detail === "string" ? ` (${detail})` : "";
}

/** fetch says "fetch failed"; what happened is in its cause. */
function causeOf(error: unknown): string {
  const cause = (error as { cause?: unknown }).cause ?? error;
  const { code, message } = cause as { code?: unknown; message?: unknown };
  return String(code ?? message ?? cause);
}

/** Exponential, between half and all of its length; `chance` in [0, 1). */
export function backOffMs(attempt: number, chance: number): number {
  const whole = Math.min(LONGEST_DELAY_MS, FIRST_DELAY_MS * 2 ** attempt);
  return Math.round(whole * (0.5 + 0.5 * chance));
}

/** Seconds or an HTTP date (RFC 9110, 10.2.3) in milliseconds from `now`; null where it is neither. */
export function retryAfterMs(value: string | null, now: number): number | null {
  if (value === null) return null;
  if (/^\d+$/.test(value.trim())) return Number(value) * 1000;
  const date = Date.parse(value);
  return Number.isNaN(date) ? null : Math.max(0, date - now);
}
