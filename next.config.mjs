/** @type {import('next').NextConfig} */
const config = {
  // Several builds may live side by side (the test run keeps its own); see lib/launch.
  distDir: process.env.POLEWRIGHT_DIST ?? '.next',
  poweredByHeader: false,
  reactStrictMode: true,
  devIndicators: false,
  serverExternalPackages: ['@node-rs/argon2', 'pg', 'pino', 'nodemailer', 'smtp-server'],
}

export default config
