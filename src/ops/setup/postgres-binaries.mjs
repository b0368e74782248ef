import { existsSync, mkdirSync, readdirSync, writeFileSync } from "node:fs";
import { aptInstall, mayInstall } from "./debian.mjs";
import { step } from "./progress.mjs";
import { SetupError } from "./run.mjs";

const DEBIAN_ROOT = "/usr/lib/postgresql";
const OLDEST = 15;

/** Majors whose server is installed, newest first. `/usr/bin/psql` alone would only be the client. */
function installedMajors() {
  if (!existsSync(DEBIAN_ROOT)) return [];
  return readdirSync(DEBIAN_ROOT)
    .map(Number)
    .filter((major) => major >= OLDEST && existsSync(`${DEBIAN_ROOT}/${major}/bin/postgres`))
    .sort((a, b) => b - a);
}

/** Folder of the server's programs; `major` asks for the version that made an existing data directory. */
export async function ensurePostgres(major) {
  const pick = () => {
    const majors = installedMajors();
    return major === undefined ? majors[0] : majors.find((installed) => installed === major);
  };
  if (pick() === undefined) {
    const wanted = `postgresql-${major ?? OLDEST}`;
    if (!mayInstall()) {
      throw new SetupError(`PostgreSQL is missing: install it as root with "apt-get install ${wanted}", or set DATABASE_URL to a server of your own.`);
    }
    await step("Installing PostgreSQL", async () => {
      // Else Debian makes a cluster of its own and starts it on port 5432.
      mkdirSync("/etc/postgresql-common/createcluster.d", { recursive: true });
      writeFileSync("/etc/postgresql-common/createcluster.d/tailmark.conf", "create_main_cluster = false\n");
      await aptInstall(major === undefined ? [wanted, "postgresql"] : [wanted]);
    });
  }
  const found = pick();
  if (found === undefined) throw new SetupError(`PostgreSQL ${major ?? OLDEST} was installed, but its server is not under ${DEBIAN_ROOT}.`);
  return `${DEBIAN_ROOT}/${found}/bin`;
}
