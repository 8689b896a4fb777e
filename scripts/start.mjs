/** Runs the built server in production mode; signals go to it, and its end is the end of this process. */
import { spawn } from "node:child_process";
import { existsSync } from "node:fs";
import { dirname, join } from "node:path";
import { fileURLToPath } from "node:url";

const root = dirname(dirname(fileURLToPath(import.meta.url)));
const server = join(root, "dist", "server", "index.js");
if (!existsSync(server)) {
  process.stderr.write("The server is not built: run npm run build first.\n");
  process.exit(1);
}
const child = spawn(process.execPath, ["--enable-source-maps", server], {
  stdio: "inherit",
  env: { ...process.env, NODE_ENV: "production" },
});
const SIGNALS = ["SIGTERM", "SIGINT", "SIGHUP"];
for (const signal of SIGNALS) {
  process.on(signal, () => {
    // Ctrl-C reaches the whole group by itself: a second signal would cut the server's grace short.
    if (signal !== "SIGINT" || !process.stdin.isTTY) child.kill(signal);
  });
}
child.on("exit", (code, signal) => process.exit(code ?? (signal === "SIGTERM" || signal === "SIGINT" ? 0 : 1)));
