import { existsSync } from "node:fs";
import { delimiter, join } from "node:path";

const NAMES = ["chromium", "chromium-browser", "google-chrome", "google-chrome-stable"];

/** First executable of these names on the PATH, or null. */
export function onPath(...names) {
  const folders = (process.env.PATH ?? "").split(delimiter).filter(Boolean);
  for (const name of names) {
    const found = folders.map((folder) => join(folder, name)).find((file) => existsSync(file));
    if (found) return found;
  }
  return null;
}

/** The browser that the end-to-end tests drive: CHROMIUM_PATH, or one of the usual names; null where there is none. */
export function findChromium() {
  const told = process.env.CHROMIUM_PATH;
  if (told) return existsSync(told) ? told : null;
  return onPath(...NAMES) ?? NAMES.map((name) => join("/usr/bin", name)).find((file) => existsSync(file)) ?? null;
}
