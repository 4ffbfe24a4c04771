import { randomBytes } from "node:crypto";
import { existsSync, readFileSync, renameSync, writeFileSync } from "node:fs";
import { join } from "node:path";
import { newPassword } from "./postgres.mjs";
import { SetupProblem, secretsLost } from "./problems.mjs";

/**
 * @typedef {object} Secrets
 * @property {import("./postgres.mjs").Passwords} passwords of the database roles
 * @property {string} authSecret key of sign-in
 * @property {string} storageLinkSecret key of upload and download links
 * @property {string} actionsKey base64 of 32 bytes; the build and the server must agree on it
 */

/** @returns {Secrets} */
export function newSecrets() {
  return {
    passwords: { admin: newPassword(), owner: newPassword(), app: newPassword() },
    authSecret: randomBytes(32).toString("hex"),
    storageLinkSecret: randomBytes(32).toString("hex"),
    actionsKey: randomBytes(32).toString("base64"),
  };
}

/**
 * Reads the secrets of a data folder, making them at the first start; only this user may read the file.
 * @param {string} dataFolder
 * @returns {Secrets}
 * @throws SetupProblem when the file is gone or damaged and the database that it opens is there
 */
export function loadSecrets(dataFolder) {
  const file = join(dataFolder, "secrets.json");
  const cluster = join(dataFolder, "pg");
  if (existsSync(file)) {
    try {
      const secrets = JSON.parse(readFileSync(file, "utf8"));
      if (isComplete(secrets)) return secrets;
    } catch {
      // told below
    }
  }
  if (existsSync(cluster)) throw new SetupProblem(secretsLost({ folder: cluster, file }));
  const secrets = newSecrets();
  writeFileSync(`${file}.new`, `${JSON.stringify(secrets, null, 2)}\n`, { mode: 0o600 });
  renameSync(`${file}.new`, file);
  return secrets;
}

/** @param {Partial<Secrets>} secrets @returns {secrets is Secrets} */
function isComplete({ passwords, authSecret, storageLinkSecret, actionsKey }) {
  const texts = [
    passwords?.admin,
    passwords?.owner,
    passwords?.app,
    authSecret,
    storageLinkSecret,
    actionsKey,
  ];
  return texts.every((text) => typeof text === "string" && text.length >= 32);
}
