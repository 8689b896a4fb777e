// A thread of its own for `ingest.ts`, so that its clock does not stand still while the main thread makes and sends
// bodies: asks for a page's data over and over and tells how long each answer took.
import { parentPort, workerData } from "node:worker_threads";

const { url, token } = workerData;
let times = [];
parentPort.on("message", () => {
  parentPort.postMessage(times);
  times = [];
});
for (;;) {
  const start = performance.now();
  const answer = await fetch(url, { headers: { Authorization: `Bearer ${token}` } });
  await answer.arrayBuffer();
  if (!answer.ok) throw new Error(`the page's data was answered with ${answer.status}`);
  times.push(performance.now() - start);
  await new Promise((resolve) => setTimeout(resolve, 10));
}
