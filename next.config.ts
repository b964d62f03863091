import type { NextConfig } from "next";

const config: NextConfig = {
  distDir: process.env.NEXT_DIST_DIR ?? ".next",
  poweredByHeader: false,
  serverExternalPackages: ["@node-rs/argon2", "@react-pdf/renderer", "mysql2", "pino", "fft.js"],
  turbopack: {
    // audio-decode imports a decoder it does not depend on; without the alias the build fails.
    resolveAlias: { "@audio/decode-ape": "./lib/audio/no-decoder.ts" },
  },
  experimental: { serverActions: { bodySizeLimit: "1mb" } },
};

export default config;
