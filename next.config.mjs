// Headers of every answer. The content security policy with its nonce is set by proxy.ts, which leaves out the paths below.
const EVERYWHERE = [
  { key: "X-Content-Type-Options", value: "nosniff" },
  { key: "X-Frame-Options", value: "DENY" },
  { key: "Referrer-Policy", value: "same-origin" },
  { key: "Cross-Origin-Opener-Policy", value: "same-origin" },
  { key: "Cross-Origin-Resource-Policy", value: "same-origin" },
  { key: "Permissions-Policy", value: "camera=(), geolocation=(), microphone=(), payment=(), usb=()" },
];
const NOTHING_RUNS = [
  { key: "Content-Security-Policy", value: "default-src 'none'; base-uri 'none'; frame-ancestors 'none'" },
];

/** @type {import("next").NextConfig} */
const config = {
  // The browser tests build into a folder of their own, so that a running server keeps its files.
  distDir: process.env.NEXT_DIST_DIR || ".next",
  reactStrictMode: true,
  poweredByHeader: false,
  productionBrowserSourceMaps: false,
  typedRoutes: true,
  agentRules: false,
  // A build asks nobody on the network and waits for no answer. A page that the policy refuses answers 403.
  experimental: { agentUpgrade: false, authInterrupts: true },
  // `npm run check` holds the types, tests included; a start on a user's machine need not check them again.
  typescript: { ignoreBuildErrors: true },
  images: { unoptimized: true },
  serverExternalPackages: ["pg", "pg-boss", "pino", "nodemailer"],
  turbopack: { root: import.meta.dirname },
  headers: async () => [
    { source: "/:path*", headers: EVERYWHERE },
    { source: "/api/uploads/:path*", headers: NOTHING_RUNS },
    { source: "/api/revisions/:revision/values-check", headers: NOTHING_RUNS },
    { source: "/icon.svg", headers: NOTHING_RUNS },
  ],
};

export default config;
