import type { CookieOptions, Request, Response } from "express";
import type { Config } from "../../config.ts";

/** Sessions end by themselves after half a day. */
export const SESSION_SECONDS = 12 * 60 * 60;

const secure = (config: Config) => config.publicUrl.startsWith("https:");

/** Browsers let only this host, over TLS, set a cookie whose name begins with __Host-. */
function cookieName(config: Config): string {
  return secure(config) ? "__Host-clinograph" : "clinograph";
}

function options(config: Config): CookieOptions {
  return { httpOnly: true, sameSite: "lax", secure: secure(config), path: "/" };
}

export function setSessionCookie(config: Config, response: Response, value: string): void {
  response.cookie(cookieName(config), value, { ...options(config), maxAge: SESSION_SECONDS * 1000 });
}

export function clearSessionCookie(config: Config, response: Response): void {
  response.clearCookie(cookieName(config), options(config));
}

export function sessionCookieOf(config: Config, request: Request): string | null {
  const cookies = request.cookies as Record<string, unknown>;
  const value = cookies[cookieName(config)];
  return typeof value === "string" ? value : null;
}
