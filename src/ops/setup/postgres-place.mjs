import { spawnSync } from "node:child_process";
import { createHash } from "node:crypto";
import { chmodSync, chownSync, existsSync, mkdirSync, mkdtempSync, readFileSync, statSync } from "node:fs";
import { tmpdir } from "node:os";
import { dirname, join } from "node:path";
import { SetupError } from "./run.mjs";

/** The account that the server runs under: PostgreSQL refuses to run as root. Empty for an ordinary user. */
export function serverAccount() {
  if (process.getuid() !== 0) return {};
  const entry = readFileSync("/etc/passwd", "utf8").split("\n").find((line) => line.startsWith("postgres:"));
  if (!entry) throw new SetupError("There is no account named postgres for the database server to run under.");
  const [, , uid, gid] = entry.split(":");
  return { uid: Number(uid), gid: Number(gid) };
}

export function makeFolderFor(account, path) {
  mkdirSync(path, { recursive: true, mode: 0o700 });
  if (account.uid !== undefined) chownSync(path, account.uid, account.gid);
  chmodSync(path, 0o700);
}

function canReach(account, path) {
  if (account.uid === undefined) return true;
  return spawnSync("/usr/bin/test", ["-x", path], { ...account, cwd: "/" }).status === 0;
}

/** Where the data go when a parent of the wanted folder is closed to the server's account. */
function placeElsewhere(wanted) {
  return join("/var/tmp", `tailmark-${shortHash(wanted)}`);
}

/** Version of the server that made the data directory, or undefined where there is none yet. */
export function majorOfData(wanted) {
  const file = [wanted, placeElsewhere(wanted)].map((place) => join(place, "PG_VERSION")).find((path) => existsSync(path));
  return file === undefined ? undefined : Number(readFileSync(file, "utf8"));
}

/** The wanted data directory, or one under /var/tmp where a parent folder is closed to the server's account. */
export function placeData(account, wanted) {
  mkdirSync(dirname(wanted), { recursive: true });
  const place = canReach(account, dirname(wanted)) ? wanted : placeElsewhere(wanted);
  refuseOtherOwner(account, place);
  return place;
}

function refuseOtherOwner(account, place) {
  if (!existsSync(place)) return;
  const owner = statSync(place).uid;
  const wanted = account.uid ?? process.getuid();
  if (owner === wanted) return;
  const other = account.uid === undefined ? "by root" : "by an ordinary user";
  throw new SetupError(`The database in ${place} was made ${other} and can only be started that way again. Start as before, or remove that folder to begin anew.`);
}

/**
 * A new folder for the server's socket: outside the project, since a socket inside it stops the builder; short, since
 * its path has at most 107 bytes; of an unforeseeable name, so that nobody can lay a link in its place.
 */
export function newSocketFolder(account) {
  const parent = tmpdir().length > 60 ? "/tmp" : tmpdir();
  const path = mkdtempSync(join(parent, "tailmark-"));
  if (account.uid !== undefined) chownSync(path, account.uid, account.gid);
  return path;
}

function shortHash(text) {
  return createHash("sha256").update(text).digest("hex").slice(0, 12);
}
