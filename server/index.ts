import closeWithGrace from "close-with-grace";
import { readConfig } from "./config.ts";
import { startServer } from "./start.ts";

/** A posting under way may take this long to finish before the process ends without it. */
const GRACE_MS = 120_000;

const config = readConfig();
const server = await startServer(config).catch((error: NodeJS.ErrnoException) => {
  if (error.code !== "EADDRINUSE" && error.code !== "EACCES") throw error;
  process.stderr.write(`Cannot listen at ${config.host}:${config.port} (${error.code}). Set PORT to another.\n`);
  process.exit(1);
});
const { logger } = server.context;
logger.info({ url: server.url }, "listening");
if (server.setUpLink !== null) {
  process.stdout.write(`\nNobody is known here yet. Make the first administrator at\n  ${server.setUpLink}\n\n`);
}
closeWithGrace({ delay: GRACE_MS, logger: false }, async ({ err, signal }) => {
  if (err) logger.fatal({ err }, "stopping after an error");
  else logger.info({ signal }, "stopping");
  await server.close();
});
