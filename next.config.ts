import type { NextConfig } from "next";

const config: NextConfig = {
  reactStrictMode: true,
  poweredByHeader: false,
  // Native and worker-loading packages stay what they are on the server.
  serverExternalPackages: ["@node-rs/argon2", "pg", "nodemailer", "yjs", "y-protocols", "lib0"],
  typedRoutes: false,
  // Types are checked by `npm test`, once, and not again in every build.
  typescript: { ignoreBuildErrors: true },
  devIndicators: false,
};

export default config;
