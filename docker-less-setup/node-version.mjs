// No imports and no recent syntax: this file is read by a Node.js that may be far too old for the rest.

/** Oldest Node.js that the packages of this project accept. */
const NODE_MINIMUM = "20.20.0";

/**
 * @param {string} found e.g. "v18.19.0"
 * @param {string} minimum e.g. "20.20.0"
 * @returns {string | null} a plain sentence when `found` is older, else null
 */
export function oldNodeMessage(found, minimum) {
  const have = found.replace("v", "").split(".").map(Number);
  const need = minimum.split(".").map(Number);
  for (let part = 0; part < 3; part += 1) {
    if (have[part] > need[part]) return null;
    if (have[part] < need[part]) {
      return (
        "Node.js " +
        found.replace("v", "") +
        " is too old: Twinpass needs " +
        minimum +
        " or newer. " +
        "Install a newer Node.js 20 (or later), see that `node --version` shows it, and try again."
      );
    }
  }
  return null;
}

/** Ends the process with a plain sentence when this Node.js is too old. */
export function demandNode() {
  const message = oldNodeMessage(process.version, NODE_MINIMUM);
  if (message !== null) {
    console.error(message);
    process.exit(1);
  }
}
