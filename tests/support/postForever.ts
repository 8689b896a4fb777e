import { writeSync } from "node:fs";
import { loadConfig } from "../../server/config.ts";
import { createContext } from "../../server/context.ts";
import { Project } from "../../server/db/models/Project.ts";
import { postBuild } from "../../server/features/builds/post.ts";
import { blockOf, buildOf, commitOf, numbers } from "./hull.ts";

/**
 * Posts builds of one commit after another to the record in the folder given, and writes a line with the commit's
 * number as soon as each is acknowledged. Never ends of itself: it is there to be killed.
 */
const [folder, first] = process.argv.slice(2);
const context = await createContext(loadConfig({ CLINOGRAPH_DATA: folder, LOG_LEVEL: "silent" }));
const project =
  (await Project.findOne({ where: { slug: "hull" } })) ??
  (await context.db.write((w) =>
    w.create(Project, { slug: "hull", name: "Hull", defaultBranch: "main", createdAt: Date.now() }),
  ));

for (let n = Number(first); ; n++) {
  // Every other commit breaks what the one before mended, so that breaks are written too.
  const reference = numbers(40, 40, n);
  const derivative = reference.map((row, at) => row.map((value) => (at === 3 && n % 2 === 0 ? -value : value)));
  const blocks = [
    blockOf({ model: "rotor.thrust", derivative, reference }),
    blockOf({ model: "wake.deficit", derivative: reference, reference }),
  ];
  const bytes = Buffer.from(JSON.stringify(buildOf(commitOf(n), blocks)));
  await postBuild(context, project, { bytes, encoding: "identity" }, "kept");
  writeSync(1, `${n}\n`);
}
