import { createHash } from "node:crypto";
import { existsSync, readdirSync, readFileSync, rmSync, writeFileSync } from "node:fs";
import { join } from "node:path";
import { demandRoom, freeBytes } from "./machine.mjs";
import { runStep } from "./processes.mjs";

const BUILD_BYTES = 5e8;
/** What a build is made of. Tests, papers and these scripts are not part of it. */
const SOURCES = ["app", "components", "db", "lib", "public", "storage"];
const ROOT_FILE =
  /^(proxy|instrumentation(-client)?|mdx-components)\.tsx?$|^(next|postcss|tailwind)\.config\.\w+$|^(package-lock|tsconfig)\.json$/;

/** @param {string} folder @returns {string[]} paths of all files below it */
function filesBelow(folder) {
  if (!existsSync(folder)) return [];
  const entries = readdirSync(folder, { withFileTypes: true, recursive: true });
  return entries.filter((entry) => entry.isFile()).map((entry) => join(entry.parentPath, entry.name));
}

/**
 * @param {string} root
 * @param {string} salt what else the build depends on
 * @returns {string} SHA-256 over the paths and contents of all sources of a build
 */
function sourceDigest(root, salt) {
  const rootFiles = readdirSync(root).filter((name) => ROOT_FILE.test(name));
  const files = [
    ...SOURCES.flatMap((name) => filesBelow(join(root, name))),
    ...rootFiles.map((name) => join(root, name)),
  ];
  const digest = createHash("sha256").update(salt);
  for (const file of files.sort()) {
    const content = createHash("sha256").update(readFileSync(file)).digest("hex");
    digest.update(`${file.slice(root.length)}\0${content}\n`);
  }
  return digest.digest("hex");
}

/**
 * Builds for production unless the last build of that folder was made from the same sources.
 * @param {{ root: string, distDir: string, actionsKey: string, logFile: string, say: (line: string) => void }} options
 * `distDir`: relative to root
 * @returns {Promise<boolean>} whether it built
 */
export async function ensureBuild({ root, distDir, actionsKey, logFile, say }) {
  const marker = join(root, distDir, "twinpass-sources");
  const digest = sourceDigest(root, `${process.version} ${actionsKey}`);
  const complete = existsSync(join(root, distDir, "BUILD_ID")) && existsSync(marker);
  if (complete && readFileSync(marker, "utf8") === digest) return false;
  demandRoom({ folder: root, freeBytes: freeBytes(root), neededBytes: BUILD_BYTES });
  // A build that is interrupted must not pass for the one before it.
  rmSync(marker, { force: true });
  say("Building for production (about half a minute)");
  await runStep(
    "The production build",
    process.execPath,
    [join(root, "node_modules/next/dist/bin/next"), "build"],
    {
      cwd: root,
      logFile,
      env: {
        ...process.env,
        NODE_ENV: "production",
        NEXT_DIST_DIR: distDir,
        NEXT_TELEMETRY_DISABLED: "1",
        NEXT_SERVER_ACTIONS_ENCRYPTION_KEY: actionsKey,
      },
    },
  );
  writeFileSync(marker, digest);
  return true;
}
