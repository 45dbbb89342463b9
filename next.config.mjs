/** @type {import('next').NextConfig} */
const nextConfig = {
  agentRules: false,
  serverExternalPackages: ['piscina', '@node-rs/argon2', 'pino'],
  experimental: { agentUpgrade: false },
  poweredByHeader: false,
  devIndicators: false,
  // `npm run types` checks everything once, tests included, and `npm run check` runs it before the build.
  typescript: { ignoreBuildErrors: true },
  headers: async () => [
    {
      source: '/:path*',
      headers: [
        { key: 'X-Content-Type-Options', value: 'nosniff' },
        { key: 'X-Frame-Options', value: 'DENY' },
        { key: 'Content-Security-Policy', value: "frame-ancestors 'none'; base-uri 'self'; form-action 'self'" },
        // Invitation tokens stand in addresses.
        { key: 'Referrer-Policy', value: 'same-origin' },
      ],
    },
    {
      // So do the secrets of releases that are open by link.
      source: '/r/:path*',
      has: [{ type: 'query', key: 'key' }],
      headers: [
        { key: 'Referrer-Policy', value: 'no-referrer' },
        { key: 'X-Robots-Tag', value: 'noindex, nofollow' },
      ],
    },
  ],
}

export default nextConfig
