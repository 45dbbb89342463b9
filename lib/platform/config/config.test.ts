import path from 'node:path'
import { describe, expect, it } from 'vitest'
import { parseConfig } from './config'

describe('parseConfig', () => {
  it('needs no setting at all', () => {
    const config = parseConfig({})
    expect(config.dataFolder).toBe(path.resolve('data'))
    expect(config.siteUrl).toBe('http://127.0.0.1:3000')
    expect(config.smtpUrl).toBeUndefined()
  })

  it('takes empty text for not set, as a copied .env.example has it', () => {
    expect(parseConfig({ SMTP_URL: '', NEXTAUTH_URL: ' ' }).smtpUrl).toBeUndefined()
  })

  it('drops the slash at the end of the address, so that links have one', () => {
    expect(parseConfig({ NEXTAUTH_URL: 'https://ringside.test/' }).siteUrl).toBe('https://ringside.test')
  })

  it.each([
    [{ PORT: 'three' }, 'PORT'],
    [{ PORT: '70000' }, 'PORT'],
    [{ RINGSIDE_WORKERS: '0' }, 'RINGSIDE_WORKERS'],
    [{ NEXTAUTH_URL: 'not an address' }, 'NEXTAUTH_URL'],
    [{ SMTP_URL: 'https://mail.test' }, 'SMTP_URL'],
  ])('refuses %j by the name of the setting', (environment, name) => {
    expect(() => parseConfig(environment)).toThrow(name)
  })
})
