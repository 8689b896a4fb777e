#!/usr/bin/env node
import { main } from "./report/main.ts";

process.exitCode = await main(process.argv.slice(2), {
  environment: process.env,
  folder: process.cwd(),
  input: process.stdin,
  output: process.stdout,
  errors: process.stderr,
});
