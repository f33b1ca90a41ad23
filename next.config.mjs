/** @type {import('next').NextConfig} */
const config = {
  // Several builds may live side by side (the test run keeps its own); see lib/launch.
  distDir: process.env.POLEWRIGHT_DIST ?? '.next',
  poweredByHeader: false,
  reactStrictMode: true,
  devIndicators: false,
  // Types are checked by `npm run check`, over all the code; a build would do it again, and write its own folders into tsconfig.json (the
  // empty "references" there keeps it from that).
  typescript: { ignoreBuildErrors: true },
  serverExternalPackages: ['@node-rs/argon2', 'pg', 'pino', 'nodemailer', 'smtp-server'],
}

export default config
