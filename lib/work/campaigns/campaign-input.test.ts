import { describe, expect, it } from 'vitest'
import { DEFAULT_MEAN_RULE } from '@/lib/science/agreement/mean-rule'
import { DEFAULT_RELIABILITY_RULE } from '@/lib/science/agreement/reliability-rule'
import { CampaignInput, NamePattern, parseCampaignForm } from './campaign-input'
import { RuleInput } from './rule-input'

const FIELDS = { name: 'North field', survey: 'Saltmarsh Wide Survey', acronym: 'SWS', bands: 'g r i' }

const faults = (parse: () => unknown): Record<string, string> => {
  try {
    parse()
    return {}
  } catch (error) {
    const { issues } = error as { issues: { path: PropertyKey[]; message: string }[] }
    return Object.fromEntries(issues.map((issue) => [String(issue.path[0]), issue.message]))
  }
}

describe('the rule', () => {
  it('takes the defaults where nothing is said', () => {
    expect(RuleInput.parse({})).toEqual({ method: 'mean', ...DEFAULT_MEAN_RULE })
  })

  it('reads a comma as a decimal point', () => {
    expect(RuleInput.parse({ confirmMean: '2,25' })).toMatchObject({ confirmMean: 2.25 })
  })

  it('does not take an empty field for 0', () => {
    expect(faults(() => RuleInput.parse({ setAsideMean: '', gradesWanted: ' ' }))).toEqual({
      setAsideMean: 'The mean that sets aside is a number of points, such as 1.',
      gradesWanted: 'The number of grades wanted is a whole number, such as 6.',
    })
  })

  it.each([
    [{ gradesWanted: '2.5' }, 'gradesWanted'],
    [{ gradesWanted: '0' }, 'gradesWanted'],
    [{ gradesWanted: '1e9' }, 'gradesWanted'],
    [{ gradesWanted: '3', leastGrades: '4' }, 'leastGrades'],
    [{ confirmMean: '3.1' }, 'confirmMean'],
    [{ confirmMean: '1', setAsideMean: '1' }, 'setAsideMean'],
    [{ splitSpread: 'Infinity' }, 'splitSpread'],
    [{ splitSpread: 'abc' }, 'splitSpread'],
    [{ splitSpread: '1.51' }, 'splitSpread'],
    [{ splitSpread: '-0.1' }, 'splitSpread'],
  ])('refuses %j with a sentence at its field', (fields, name) => {
    expect(Object.keys(faults(() => RuleInput.parse(fields)))).toEqual([name])
  })
})

describe('the rule of the reliability method', () => {
  const METHOD = { method: 'reliability' }

  it('takes the defaults where nothing else is said', () => {
    const { falseConfirmed, missedLens, leastGrades, mostLooks } = DEFAULT_RELIABILITY_RULE
    expect(RuleInput.parse(METHOD)).toEqual({
      ...METHOD,
      gradesWanted: mostLooks,
      leastGrades,
      falseConfirmed,
      missedLens,
    })
  })

  it('leaves out what belongs to the other method', () => {
    expect(Object.keys(RuleInput.parse({ ...METHOD, confirmMean: '2' }))).not.toContain('confirmMean')
  })

  it.each([
    [{ gradesWanted: '0' }, 'gradesWanted'],
    [{ gradesWanted: '51' }, 'gradesWanted'],
    [{ gradesWanted: '3', leastGrades: '4' }, 'leastGrades'],
    [{ falseConfirmed: '0' }, 'falseConfirmed'],
    [{ falseConfirmed: '' }, 'falseConfirmed'],
    [{ missedLens: '1' }, 'missedLens'],
    [{ missedLens: 'few' }, 'missedLens'],
    [{ falseConfirmed: '0.6', missedLens: '0,4' }, 'missedLens'],
  ])('refuses %j with a sentence at its field', (fields, name) => {
    expect(Object.keys(faults(() => RuleInput.parse({ ...METHOD, ...fields })))).toEqual([name])
  })

  it('knows two methods and says which', () => {
    expect(faults(() => RuleInput.parse({ method: 'median' }))).toEqual({
      method: 'The method is one of: mean, reliability.',
    })
  })
})

it('takes a spread up to the largest that grades can have, and says which that is', () => {
  // Population standard deviation of one 3 and one 0: sqrt(mean of squares - square of mean) = sqrt(4.5 - 2.25).
  expect(RuleInput.parse({ splitSpread: String(Math.sqrt(9 / 2 - 1.5 ** 2)) })).toMatchObject({ splitSpread: 1.5 })
  expect(faults(() => RuleInput.parse({ splitSpread: '2' }))).toEqual({
    splitSpread:
      'The spread that splits is between 0 and 1.5 points: as many A as N spread by 1.5, and nothing spreads more.',
  })
})

describe('the campaign', () => {
  it('keeps the order of the bands, however they are set apart', () => {
    expect(CampaignInput.parse({ ...FIELDS, bands: ' g,r;  i\nF814W ' }).bands).toEqual(['g', 'r', 'i', 'F814W'])
  })

  it.each([
    [{ name: '  ' }, 'name'],
    [{ acronym: 'SW' }, 'acronym'],
    [{ acronym: 'sws' }, 'acronym'],
    [{ acronym: 'S W S' }, 'acronym'],
    [{ bands: '' }, 'bands'],
    [{ bands: 'g g' }, 'bands'],
    [{ bands: 'g <script>' }, 'bands'],
    [{ namePattern: '{band}' }, 'namePattern'],
    [{ namePattern: '{candidate}_{filter}' }, 'namePattern'],
  ])('refuses %j with a sentence at its field', (fields, name) => {
    expect(Object.keys(faults(() => CampaignInput.parse({ ...FIELDS, ...fields })))).toEqual([name])
  })

  it('takes an empty name pattern for the default', () => {
    expect(NamePattern.parse(' ')).toBeNull()
  })

  it('has at most two {any}', () => {
    expect(NamePattern.parse('{any}_{candidate}_{any}_{band}')).toBe('{any}_{candidate}_{any}_{band}')
    expect(() => NamePattern.parse('{any}{any}{any}{candidate}')).toThrow('at most two {any}')
  })
})

it('tells the faults of both parts of the form in one go', () => {
  const found = faults(() => parseCampaignForm({ ...FIELDS, name: '', gradesWanted: 'many' }))
  expect(Object.keys(found).sort()).toEqual(['gradesWanted', 'name'])
})
