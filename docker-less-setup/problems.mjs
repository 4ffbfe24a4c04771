/** A reason to stop that a person can act on: printed as it stands, without a stack. */
export class SetupProblem extends Error {
  /** @param {string} message what happened, where, and what to do */
  constructor(message) {
    super(message);
    this.name = "SetupProblem";
  }
}

/** @param {number} bytes @returns {string} e.g. "1.5 GB" (decimal) */
export function gigabytes(bytes) {
  return `${(bytes / 1e9).toFixed(1)} GB`;
}

/**
 * @param {string} log
 * @param {number} count
 * @returns {string} that many lines, indented: from the first that speaks of an error, else the last
 */
export function excerpt(log, count) {
  const lines = log.trimEnd().split("\n");
  const first = lines.findIndex((line) => /\berror\b/i.test(line));
  const from = first === -1 ? lines.length - count : first;
  return lines
    .slice(Math.max(from, 0), Math.max(from, 0) + count)
    .map((line) => `    ${line}`)
    .join("\n");
}

/**
 * @param {{ port: number, owner: { pid: number, command: string } | null, free: number }} facts
 * `owner` is null when this user may not see whose port it is.
 */
export function portTaken({ port, owner, free }) {
  const who = owner ? `by process ${owner.pid} (${owner.command})` : "by a process of another user";
  return `Port ${port} is taken ${who}. Stop that process, or choose another port: PORT=${free} npm start`;
}

/** @param {{ value: string }} facts the text given as PORT */
export function portUnusable({ value }) {
  return `PORT=${value} is not a port. Give a whole number from 1024 to 65535, e.g. PORT=3001 npm start`;
}

/** @param {{ folder: string, freeBytes: number, neededBytes: number }} facts */
export function diskFull({ folder, freeBytes, neededBytes }) {
  return (
    `The disk that holds ${folder} is full: ${gigabytes(freeBytes)} are free and this step needs ` +
    `${gigabytes(neededBytes)}. Make room there and try again; what is done so far is kept.`
  );
}

/** @param {{ packages: string[], apt: boolean, user: string }} facts */
export function noPackageRights({ packages, apt, user }) {
  const names = packages.join(" ");
  if (!apt) {
    return (
      `${names} is not installed, and this machine has no apt-get to install it with. ` +
      `Install ${names} in this system's own way (version 15 or newer for postgresql) and try again.`
    );
  }
  return (
    `${names} is not installed, and the user ${user} may not install packages (not root, and sudo asks for a ` +
    `password). Run this once and try again:  sudo apt-get install -y --no-install-recommends ${names}`
  );
}

/** @param {{ packages: string[], log: string, logFile: string }} facts */
export function packageInstallFailed({ packages, log, logFile }) {
  return (
    `apt-get could not install ${packages.join(" ")}. What it said (all of it in ${logFile}):\n${excerpt(log, 8)}\n` +
    "Mend what it names (package sources, network, another apt-get at work) and try again."
  );
}

/** @param {{ step: string, code: number | null, log: string, logFile: string }} facts */
export function stepFailed({ step, code, log, logFile }) {
  const end = code === null ? "was stopped" : `ended with code ${code}`;
  return `${step} ${end}. What it said (all of it in ${logFile}):\n${excerpt(log, 15)}`;
}

/** @param {{ folder: string, blockedAt: string, user: string }} facts */
export function folderUnreachable({ folder, blockedAt, user }) {
  return (
    `The database user ${user} can't reach ${folder}, because ${blockedAt} is closed to other users. ` +
    `Started by root, the database runs as ${user}. Open the way (chmod o+x ${blockedAt}), or put this folder ` +
    "somewhere open such as /srv, or start as an ordinary user."
  );
}

/** @param {{ folder: string, owner: string, user: string }} facts */
export function folderOfAnother({ folder, owner, user }) {
  return (
    `${folder} belongs to ${owner}, and you are ${user}: Twinpass was first started here by somebody else. ` +
    "Start it as that user (as root, where root started it first), or use a clone of your own."
  );
}

/** @param {{ user: string }} facts */
export function noDatabaseUser({ user }) {
  return (
    `PostgreSQL refuses to run as root, and the user ${user} to run it as does not exist. ` +
    `Make one (adduser --system --group ${user}), or start Twinpass as an ordinary user.`
  );
}

/** @param {{ made: string, installed: string[], folder: string }} facts major versions */
export function databaseVersion({ made, installed, folder }) {
  return (
    `The database in ${folder} was made by PostgreSQL ${made}, and installed is ${installed.join(", ")}. ` +
    `Install postgresql-${made} again, or move ${folder} away to begin with an empty database.`
  );
}

/** @param {{ folder: string, file: string }} facts */
export function secretsLost({ folder, file }) {
  return (
    `${file} is missing or unreadable, but ${folder} exists: the passwords of that database are in the lost file. ` +
    `Put the file back, or move ${folder} away to begin with an empty database.`
  );
}

/** @param {{ settings: string[], folder: string }} facts */
export function notDurable({ settings, folder }) {
  const names = settings.join(", ");
  return (
    `The database in ${folder} has ${names} switched off, so what Twinpass acknowledges could be lost at a crash. ` +
    `Twinpass does not run like that. Take the setting back (ALTER SYSTEM RESET, or ALTER ROLE … RESET, for ${names}).`
  );
}

/** @param {{ pid: number, address: string }} facts */
export function alreadyRunning({ pid, address }) {
  return (
    `Twinpass is already started from this folder (process ${pid}, ${address}). ` +
    `Use that one, or stop it first: Ctrl-C in its window, or  kill ${pid}`
  );
}

/** @param {{ folder: string, user: string }} facts */
export function folderReadOnly({ folder, user }) {
  return `${user} can't write in ${folder}. Give yourself the folder, or use a clone in a folder of your own.`;
}

/** @param {{ pid: number }} facts */
export function alreadyTesting({ pid }) {
  return `npm test already runs in this folder (process ${pid}). Wait for it, or use another clone.`;
}

/** @param {{ name: string, known: string[] }} facts */
export function unknownPhase({ name, known }) {
  return `${name} is no part of the tests. Give one of ${known.join(", ")}, or nothing to run them all.`;
}
