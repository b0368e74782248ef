import { dirname } from "node:path";
import { fileURLToPath } from "node:url";

const here = dirname(fileURLToPath(import.meta.url));

/** @type {import("next").NextConfig} */
export default {
  // Tests build beside the developer's own build.
  distDir: process.env.NEXT_DIST_DIR ?? ".next",
  poweredByHeader: false,
  // Else the development server writes what people type, passwords too, into its log.
  logging: { serverFunctions: false },
  // A page that a role may not see answers 403 and shows the nearest forbidden.tsx.
  experimental: { authInterrupts: true },
  // `npm test` checks the types of everything; a first start need not wait for it.
  typescript: { ignoreBuildErrors: true },
  turbopack: { root: here },
  outputFileTracingRoot: here,
  serverExternalPackages: ["pg", "pg-copy-streams", "pg-boss", "@aws-sdk/client-s3", "@aws-sdk/lib-storage", "@tus/server", "@tus/file-store", "@node-rs/argon2", "nodemailer", "smtp-server", "mailparser"],
};
