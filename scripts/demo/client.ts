/** A signed-in person, as the pages are: a cookie, and the CSRF token with every write. */
export interface Client {
  get<T>(path: string): Promise<T>;
  post<T>(path: string, body: unknown): Promise<T>;
}

async function answer<T>(response: Response, what: string): Promise<T> {
  const text = await response.text();
  if (!response.ok) throw new Error(`${what} answers ${response.status}: ${text}`);
  return JSON.parse(text) as T;
}

const json = { "Content-Type": "application/json" };

/** A request of nobody: signing in, accepting an invitation. */
async function open(url: string, path: string, body: unknown): Promise<Response> {
  return fetch(`${url}/api/v1${path}`, { method: "POST", headers: json, body: JSON.stringify(body) });
}

export async function acceptInvitation(url: string, link: string, name: string, password: string): Promise<void> {
  const token = link.slice(link.indexOf("#") + 1);
  await answer(await open(url, "/invitations/accept", { token, name, password }), "accepting an invitation");
}

export async function signIn(url: string, email: string, password: string): Promise<Client> {
  const response = await open(url, "/session", { email, password });
  const { csrfToken } = await answer<{ csrfToken: string }>(response, "signing in");
  const cookie = response.headers
    .getSetCookie()
    .map((line) => line.split(";")[0])
    .join("; ");
  const headers = { Cookie: cookie, "X-CSRF-Token": csrfToken };
  return {
    get: async (path) => answer(await fetch(`${url}/api/v1${path}`, { headers }), path),
    post: async (path, body) => {
      const init = { method: "POST", headers: { ...headers, ...json }, body: JSON.stringify(body) };
      return answer(await fetch(`${url}/api/v1${path}`, init), path);
    },
  };
}
