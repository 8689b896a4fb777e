/** The address, or null where it is none of http or https. (`URL.canParse` is not in all of Node 18.) */
export function httpUrl(text: string): URL | null {
  try {
    const url = new URL(text);
    return /^https?:$/.test(url.protocol) ? url : null;
  } catch {
    return null;
  }
}
