import type { Metadata, Viewport } from 'next'
import { ThemeProvider } from 'next-themes'
import type { ReactNode } from 'react'
import { figuresFont, textFont } from './fonts'
import './globals.css'

export const metadata: Metadata = {
  title: { default: 'Ringside', template: '%s · Ringside' },
  description: 'Where sky-survey teams decide which of their strong-lens candidates are real.',
}

export const viewport: Viewport = { width: 'device-width', initialScale: 1 }

export default function RootLayout({ children }: { children: ReactNode }) {
  return (
    <html lang="en" className={`${textFont.variable} ${figuresFont.variable}`} suppressHydrationWarning>
      <body>
        <ThemeProvider
          attribute="data-theme"
          defaultTheme="system"
          enableSystem
          value={{ light: 'day', dark: 'night' }}
          disableTransitionOnChange
        >
          {children}
        </ThemeProvider>
      </body>
    </html>
  )
}
