import localFont from 'next/font/local'

// 'optional' keeps the layout still: a face that comes late is used from the next page on.
export const textFont = localFont({
  src: [
    {
      path: '../node_modules/@fontsource-variable/atkinson-hyperlegible-next/files/atkinson-hyperlegible-next-latin-wght-normal.woff2',
      style: 'normal',
    },
  ],
  weight: '200 800',
  variable: '--font-text',
  display: 'optional',
})

export const figuresFont = localFont({
  src: [
    {
      path: '../node_modules/@fontsource-variable/atkinson-hyperlegible-mono/files/atkinson-hyperlegible-mono-latin-wght-normal.woff2',
      style: 'normal',
    },
  ],
  weight: '200 800',
  variable: '--font-figures',
  display: 'optional',
})
