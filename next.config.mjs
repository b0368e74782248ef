import { dirname } from "node:path";
import { fileURLToPath } from "node:url";

const here = dirname(fileURLToPath(import.meta.url));

/** @type {import("next").NextConfig} */
export default {
  // Tests build beside the developer's own build.
  distDir: process.env.NEXT_DIST_DIR ?? ".next",
  poweredByHeader: false,
  turbopack: { root: here },
  outputFileTracingRoot: here,
  serverExternalPackages: ["pg", "pg-copy-streams", "pg-boss", "@node-rs/argon2", "nodemailer", "smtp-server"],
};
