import { Router } from "express";
import { PROBLEMS } from "../../http/problemCatalogue.ts";
import { NotFound } from "../../http/problem.ts";

/** A small page at each problem type's address, for whoever looks up what an answer meant. */
export function problemPages(): Router {
  const router = Router();
  router.get("/problems/:slug", (request, response) => {
    const problem = Object.entries(PROBLEMS).find(([slug]) => slug === request.params.slug)?.[1];
    if (!problem) throw new NotFound();
    response.type("html").send(html(problem.status, problem.title, problem.about));
  });
  return router;
}

const escaped = (text: string) => text.replace(/&/g, "&amp;").replace(/</g, "&lt;").replace(/>/g, "&gt;");

function html(status: number, title: string, about: string): string {
  return `<!doctype html>
<html lang="en">
<head>
<meta charset="utf-8">
<meta name="viewport" content="width=device-width, initial-scale=1">
<title>${escaped(title)} - Clinograph</title>
<style>
:root { color-scheme: light dark; }
body { font: 1.0625rem/1.6 system-ui, sans-serif; max-width: 38rem; margin: 12vh auto; padding: 0 1.25rem; }
h1 { font-size: 1.5rem; line-height: 1.25; }
</style>
</head>
<body>
<main>
<p>Status ${status}</p>
<h1>${escaped(title)}</h1>
<p>${escaped(about)}</p>
</main>
</body>
</html>
`;
}
