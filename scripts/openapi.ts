/** Prints the OpenAPI document of the API, or writes it into the file named. */
import { writeFile } from "node:fs/promises";
import { readConfig } from "../server/config.ts";
import { ROUTES } from "../server/features/routes.ts";
import { openApiDocument } from "../server/http/openapi.ts";

const text = `${JSON.stringify(openApiDocument(ROUTES, readConfig().publicUrl), null, 2)}\n`;
const file = process.argv[2];
if (file === undefined) process.stdout.write(text);
else await writeFile(file, text);
