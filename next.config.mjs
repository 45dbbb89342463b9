/** @type {import('next').NextConfig} */
const nextConfig = {
  agentRules: false,
  serverExternalPackages: ['piscina', '@node-rs/argon2', 'pino'],
  experimental: { agentUpgrade: false },
  poweredByHeader: false,
  devIndicators: false,
  // `npm run types` checks everything once, tests included, and `npm run check` runs it before the build.
  typescript: { ignoreBuildErrors: true },
}

export default nextConfig
