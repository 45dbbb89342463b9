import type { Interval } from '@/lib/science/agreement/binomial-intervals'
import type { ShareEstimate } from '@/lib/work/reports/report-types'

/** `91 %`; neither 0 nor 100 unless it is. */
export function percentOf(share: number): string {
  if (share <= 0 || share >= 1) return `${Math.round(share * 100)} %`
  return `${Math.min(99, Math.max(1, Math.round(share * 100)))} %`
}

/** `91 % (84 to 96 %)` */
export function shareInWords({ value, interval }: ShareEstimate): string {
  return `${percentOf(value)} (${Math.round(interval.low * 100)} to ${Math.round(interval.high * 100)} %)`
}

/** `0.61`, with a true minus sign; `–` for none. */
export function coefficient(value: number | null): string {
  if (value === null) return '–'
  const text = value.toFixed(2)
  return text === '-0.00' ? '0.00' : text.replace('-', '−')
}

/** `0.61 (0.55 to 0.67)` */
export function coefficientWithInterval(value: number | null, interval: Interval | null): string {
  if (value === null || !interval) return coefficient(value)
  return `${coefficient(value)} (${coefficient(interval.low)} to ${coefficient(interval.high)})`
}

/** `3.2 s`, `1 min 5 s` */
export function secondsInWords(seconds: number): string {
  const whole = Math.round(seconds)
  if (whole < 60) return `${seconds.toFixed(seconds < 10 ? 1 : 0)} s`
  return `${Math.floor(whole / 60)} min ${whole % 60} s`
}

/** `1.2`, `12`, `1,204`: looks a day. */
export function paceInWords(pace: number): string {
  return pace.toLocaleString('en', { maximumFractionDigits: pace < 10 ? 1 : 0 })
}
