/**
 * Makes a clone ready to run: checks Node, installs packages when they are missing or older than the lock file and,
 * with --browser, finds or installs Chromium. Says nothing where all is there. Needs nothing but Node itself.
 */
import { spawnSync } from "node:child_process";
import { existsSync, statSync } from "node:fs";
import { dirname, join } from "node:path";
import { fileURLToPath } from "node:url";
import { findChromium, onPath } from "./machine/chromium.mjs";

const OLDEST_NODE = [20, 19];
const root = dirname(dirname(fileURLToPath(import.meta.url)));

function stop(message) {
  process.stderr.write(`${message}\n`);
  process.exit(1);
}

function run(command, args, env = {}) {
  const told = { cwd: root, stdio: "inherit", env: { ...process.env, ...env } };
  return spawnSync(command, args, told).status === 0;
}

function checkNode() {
  const [major, minor] = process.versions.node.split(".").map(Number);
  const [oldest, oldestMinor] = OLDEST_NODE;
  if (major > oldest || (major === oldest && minor >= oldestMinor)) return;
  stop(`This needs Node.js ${OLDEST_NODE.join(".")} or newer; this is ${process.versions.node} (${process.execPath}).`);
}

function packagesAreFresh() {
  // npm writes this file at the end of an installation: half an installation does not have it.
  const installed = join(root, "node_modules", ".package-lock.json");
  return existsSync(installed) && statSync(installed).mtimeMs >= statSync(join(root, "package-lock.json")).mtimeMs;
}

/** sqlite3 compiles its part in C++ when it is installed. */
function missingCompilers() {
  const tools = { python3: ["python3"], make: ["make"], "g++": ["g++", "c++", "clang++"] };
  return Object.keys(tools).filter((name) => onPath(...tools[name]) === null);
}

function installPackages() {
  if (packagesAreFresh()) return;
  const missing = missingCompilers();
  if (missing.length > 0) {
    stop(
      `The database driver compiles when it is installed, and needs ${missing.join(", ")}.\n` +
        `On Debian or Ubuntu: apt-get install --no-install-recommends ${missing.join(" ")}`,
    );
  }
  console.log("Installing packages (the database driver compiles: about 3 minutes) ...");
  // Through the npm that called this script, if one did: its version is the one that the person chose.
  const npm = process.env.npm_execpath;
  const args = ["ci", "--no-audit", "--no-fund"];
  const done = npm?.endsWith(".js") ? run(process.execPath, [npm, ...args]) : run("npm", args);
  if (!done) stop("npm ci failed; what it says above tells why.");
}

function prepareBrowser() {
  if (findChromium() !== null) return;
  if (process.env.CHROMIUM_PATH) stop(`CHROMIUM_PATH names ${process.env.CHROMIUM_PATH}, which is not there.`);
  const installable = process.getuid?.() === 0 && onPath("apt-get") !== null;
  if (installable) {
    console.log("Installing Chromium ...");
    const quiet = { DEBIAN_FRONTEND: "noninteractive" };
    run("apt-get", ["update", "-qq"], quiet);
    run("apt-get", ["install", "-y", "-qq", "--no-install-recommends", "chromium"], quiet);
    if (findChromium() !== null) return;
  }
  stop(
    "The end-to-end tests drive Chromium, which was not found.\n" +
      "Install it (Debian: apt-get install chromium) or name an executable in CHROMIUM_PATH.",
  );
}

checkNode();
installPackages();
if (process.argv.includes("--browser")) prepareBrowser();
