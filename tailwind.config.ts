import type { Config } from 'tailwindcss'

/** Names for what look.md describes; the values are CSS variables of the theme in app/globals.css. */
export default {
  content: ['./app/**/*.{ts,tsx}', './components/**/*.{ts,tsx}'],
  theme: {
    extend: {
      colors: {
        bench: 'var(--bench)',
        tray: 'var(--tray)',
        'tray-text': 'var(--tray-text)',
        page: 'var(--page)',
        raise: 'var(--raise)',
        well: 'var(--well)',
        line: 'var(--line)',
        edge: 'var(--edge)',
        text: 'var(--text)',
        mute: 'var(--mute)',
        lamp: 'var(--lamp)',
        'lamp-ink': 'var(--lamp-ink)',
        split: 'var(--split)',
        alarm: 'var(--alarm)',
        'grade-a': 'var(--grade-a)',
        'grade-b': 'var(--grade-b)',
        'grade-c': 'var(--grade-c)',
        'grade-n': 'var(--grade-n)',
        'letter-a': 'var(--letter-a)',
        'letter-b': 'var(--letter-b)',
        'letter-c': 'var(--letter-c)',
        'letter-n': 'var(--letter-n)',
      },
      fontFamily: {
        sans: ['var(--font-text)', 'system-ui', 'sans-serif'],
        mono: ['var(--font-figures)', 'ui-monospace', 'monospace'],
      },
      fontSize: {
        note: ['0.8125rem', '1.2rem'],
        small: ['0.875rem', '1.3rem'],
        body: ['0.9375rem', '1.45rem'],
        title: ['1.375rem', '1.7rem'],
        display: ['1.875rem', '2.2rem'],
      },
      borderRadius: { key: '3px', control: '6px', tray: '4px' },
      spacing: { row: '2rem', nav: '12.5rem' },
    },
  },
} satisfies Config
