import { problemFrom, unreachable } from "./problem.ts";

type QueryValue = string | number | boolean | null | undefined;
export interface RequestOptions {
  readonly query?: Readonly<Record<string, QueryValue>>;
  readonly body?: unknown;
  readonly signal?: AbortSignal;
  /** A 401 here is an answer, not the end of a session: the sign-in form and the first look use it. */
  readonly expectSignedOut?: boolean;
}

const BASE = "/api/v1";
const credentials = { csrfToken: null as string | null, onSessionEnded: () => {} };

/** The token that the server wants to see again with every write made by cookie. */
export function setCsrfToken(token: string | null): void {
  credentials.csrfToken = token;
}
/** Called once for each answer that says that the session is over. */
export function onSessionEnded(listener: () => void): void {
  credentials.onSessionEnded = listener;
}

export function apiPath(path: string, query: RequestOptions["query"] = {}): string {
  const parameters = new URLSearchParams();
  for (const [name, value] of Object.entries(query)) {
    if (value !== null && value !== undefined && value !== "") parameters.set(name, String(value));
  }
  const text = parameters.toString();
  return `${BASE}${path}${text === "" ? "" : `?${text}`}`;
}

async function send(method: string, path: string, options: RequestOptions): Promise<Response> {
  const headers: Record<string, string> = { Accept: "application/json, application/problem+json" };
  if (options.body !== undefined) headers["Content-Type"] = "application/json";
  if (method !== "GET" && credentials.csrfToken !== null) headers["X-CSRF-Token"] = credentials.csrfToken;
  try {
    return await fetch(apiPath(path, options.query), {
      method,
      headers,
      credentials: "same-origin",
      body: options.body === undefined ? undefined : JSON.stringify(options.body),
      signal: options.signal,
    });
  } catch (error) {
    if (options.signal?.aborted) throw error;
    throw unreachable();
  }
}

async function request<T>(method: string, path: string, options: RequestOptions = {}): Promise<T> {
  const response = await send(method, path, options);
  if (!response.ok) {
    if (response.status === 401 && options.expectSignedOut !== true) credentials.onSessionEnded();
    throw await problemFrom(response);
  }
  if (response.status === 204) return undefined as T;
  return (await response.json()) as T;
}

/** The one door to the server. Paths are below /api/v1. Throws ApiProblem. */
export const client = {
  get: <T>(path: string, options?: RequestOptions) => request<T>("GET", path, options),
  post: <T>(path: string, body?: unknown, options?: RequestOptions) =>
    request<T>("POST", path, { ...options, body: body ?? {} }),
  patch: <T>(path: string, body: unknown) => request<T>("PATCH", path, { body }),
  remove: (path: string) => request<undefined>("DELETE", path),
};
