/** @type {import('next').NextConfig} */
const nextConfig = {
  agentRules: false,
  serverExternalPackages: ['piscina', '@node-rs/argon2', 'pino'],
  experimental: { agentUpgrade: false },
  poweredByHeader: false,
  devIndicators: false,
  typescript: { tsconfigPath: 'tsconfig.json' },
}

export default nextConfig
