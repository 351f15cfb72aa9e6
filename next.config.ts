import type { NextConfig } from 'next';

const config: NextConfig = {
  // Packages with native code or their own file lookups stay outside the bundle.
  serverExternalPackages: ['@node-rs/argon2', 'pg', 'pino', 'graphile-worker'],
  poweredByHeader: false,
  // `npm run check` looks at the types, those of the tests too; whoever starts the hub need not wait for it again.
  typescript: { ignoreBuildErrors: true },
  // Names in stack traces and profiles are worth more on a server than the bytes.
  experimental: { serverMinification: false },
  // Problem answers for malformed paths come from the server in front of Next; see scripts/web.ts.
  skipTrailingSlashRedirect: true,
};

export default config;
