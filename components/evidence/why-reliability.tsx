import { counted } from '@/components/campaigns/in-words'
import { logOddsOf } from '@/lib/science/agreement/posterior'
import { probabilityBeside, probabilityWithOdds } from '@/lib/science/agreement/weight-words'
import type { ReliabilityWhy, WhySince, WhyStep } from '@/lib/work/rulings/explain-reliability'
import type { EvidenceVerdict } from '@/lib/work/rulings/candidate-evidence'
import { LETTER_INK } from './grade-list'
import { lineScale, ticksOf } from './odds-scale'
import { OddsAxis, OddsTrack } from './odds-track'

/** '+3.40', '−0.12' */
export const signed = (value: number) => `${value < 0 ? '−' : '+'}${Math.abs(value).toFixed(2)}`

const CELL = 'py-1.5 align-middle'
const FIGURE = `${CELL} figures whitespace-nowrap pl-3 text-right text-small`

/**
 * A verdict by reliability as a sum: where it starts, what each grade adds, where it ends, on a line on which the rule's
 * boundaries are drawn. The table says the same in words and numbers.
 */
export function WhyReliability({ why, verdict }: { why: ReliabilityWhy; verdict: EvidenceVerdict }) {
  const scale = lineScale(why)
  const bounds = { confirm: scale(why.confirm.logOdds), setAside: scale(why.setAside.logOdds) }
  const start = scale(logOddsOf(why.prior))
  const end = scale(why.logOdds)
  const [confirm, setAside, probability] = [why.confirm.probability, why.setAside.probability, why.probability]
  return (
    <div className="flex flex-col gap-4">
      <table className="w-full text-left">
        <caption className="sr-only">
          How the probability of a lens comes about: log odds before any grade, what each grade adds, and the sum.
        </caption>
        <thead>
          <tr className="text-note text-mute">
            <th className="py-1 font-normal">Grade and what it says</th>
            <th className="w-[42%] py-1 font-normal">
              <span className="sr-only">On the line from set aside to confirmed</span>
              <span aria-hidden="true" className="flex justify-between">
                <span>set aside</span>
                <span>confirmed</span>
              </span>
            </th>
            <th className="whitespace-nowrap py-1 pl-3 text-right font-normal">
              <abbr title="natural logarithm of the odds of a lens" className="no-underline">
                log odds
              </abbr>
            </th>
          </tr>
        </thead>
        <tbody>
          <tr className="border-t border-line">
            <th scope="row" className={`${CELL} text-small font-normal`}>
              Before any grade
              <span className="block text-note text-mute">
                share of lenses <span className="figures">{probabilityWithOdds(why.prior)}</span>
              </span>
            </th>
            <td className="h-12 p-0">
              <OddsTrack bounds={bounds} dot={start} />
            </td>
            <td className={FIGURE}>{signed(logOddsOf(why.prior))}</td>
          </tr>
          {why.steps.map((step) => (
            <StepRow key={`${step.label} ${step.grade}`} step={step} scale={scale} bounds={bounds} />
          ))}
          <tr className="border-t-2 border-edge/60">
            <th scope="row" className={`${CELL} text-small`}>
              Together
              <span className="block text-note font-normal text-mute">
                probability of a lens{' '}
                <span className="figures font-semibold text-text">{probabilityWithOdds(probability)}</span>
              </span>
            </th>
            <td className="h-12 p-0">
              <OddsTrack bounds={bounds} dot={end} strong />
            </td>
            <td className={`${FIGURE} font-semibold`}>{signed(why.logOdds)}</td>
          </tr>
          <tr aria-hidden="true">
            <td />
            <td className="p-0">
              <OddsAxis ticks={axisOf(scale)} />
            </td>
            <td />
          </tr>
        </tbody>
      </table>
      <p className="max-w-prose text-small text-mute">
        The rule (version {verdict.rule.version}) confirms from a probability of{' '}
        <b className="figures font-semibold text-text">{probabilityWithOdds(confirm)}</b> (log odds{' '}
        <span className="figures">{signed(why.confirm.logOdds)}</span>) and sets aside down to{' '}
        <b className="figures font-semibold text-text">{probabilityWithOdds(setAside)}</b> (
        <span className="figures">{signed(why.setAside.logOdds)}</span>), after{' '}
        {counted(verdict.rule.leastGrades, 'grade')} at least and {counted(verdict.rule.gradesWanted, 'look')} at most.
        {why.cannotJudge > 0 ? ` ${counted(why.cannotJudge, 'look')} could not judge, which adds nothing.` : ''}
        {why.leftOut.length > 0
          ? ` Left out of the consensus, so that nothing of theirs counts: ${why.leftOut.join(', ')}.`
          : ''}
      </p>
      {why.since ? <Since why={why} since={why.since} /> : null}
      {why.changes.length > 0 ? (
        <section className="flex flex-col gap-1">
          <h3 className="text-small font-semibold">What would have changed it</h3>
          <ul className="flex max-w-prose list-disc flex-col gap-1 pl-4 text-small text-mute marker:text-edge">
            {why.changes.map((sentence) => (
              <li key={sentence}>{sentence}</li>
            ))}
          </ul>
        </section>
      ) : null}
      {why.rates.length > 0 ? <RatesOf why={why} /> : null}
    </div>
  )
}

/** Where the line is short, as on a phone, only ticks that stand far apart. */
function axisOf(scale: (logOdds: number) => number) {
  const few = ticksOf(scale, 1 / 3)
  return ticksOf(scale).map((at) => ({ at: scale(logOddsOf(at)), label: String(at), always: few.includes(at) }))
}

function StepRow({
  step,
  scale,
  bounds,
}: {
  step: WhyStep
  scale: (logOdds: number) => number
  bounds: { confirm: number; setAside: number }
}) {
  return (
    <tr className="border-t border-line">
      <th scope="row" className={`${CELL} text-small font-normal`}>
        {step.grade ? <b className={`mr-1.5 ${LETTER_INK[step.grade]}`}>{step.grade}</b> : null}
        {step.label}
        {step.own ? <span className="text-mute"> (you)</span> : null}
        <span className="block text-note text-mute">
          {step.words}: {step.factor}
        </span>
      </th>
      <td className="h-12 p-0">
        <OddsTrack bounds={bounds} step={{ from: scale(step.from), to: scale(step.to) }} />
      </td>
      <td className={FIGURE}>{signed(step.weight)}</td>
    </tr>
  )
}

/** What has come since the run: told apart, because only a run or a ruling changes a state. */
function Since({ why, since }: { why: ReliabilityWhy; since: WhySince }) {
  const what = [
    since.newGrades > 0 ? `${counted(since.newGrades, 'more grade')}` : '',
    since.newRun ? 'newer reliabilities' : '',
  ].filter(Boolean)
  return (
    <p className="max-w-prose border-l-2 border-edge pl-3 text-small">
      Since then {what.join(' and ')}:{' '}
      <b className="figures font-semibold">
        {probabilityBeside(since.probability, why.confirm.probability, why.setAside.probability)}
      </b>
      <span className="text-mute">
        {' '}
        ({since.outcome}, if a run took it in now). The verdict above stands until then.
      </span>
    </p>
  )
}

function RatesOf({ why }: { why: ReliabilityWhy }) {
  const percent = (share: number) => `${Number((100 * share).toPrecision(3))} %`
  return (
    <details className="text-small">
      <summary className="min-h-6 text-mute">Where the weights come from</summary>
      <ul className="flex max-w-prose flex-col gap-1 pt-1 text-note text-mute">
        {why.rates.map(({ by, grade, ofLenses, ofOthers, learnedFrom, calibration }) => (
          <li key={`${by} ${grade}`}>
            <span className="text-text">{by}</span> gives {grade} to{' '}
            <span className="figures">{percent(ofLenses)}</span> of lenses and to{' '}
            <span className="figures">{percent(ofOthers)}</span> of what is none
            {learnedFrom > 0
              ? `, learned from ${counted(learnedFrom, 'grade')}, ${calibration.toLocaleString('en')} of them on calibration stamps.`
              : ': nothing is known of them yet, so a newcomer’s rates stand in.'}
          </li>
        ))}
        <li>The weight is the natural logarithm of the one share over the other.</li>
      </ul>
    </details>
  )
}
