import { lapFigures, shownDifferenceS, type LapFigures } from './laps'
import type { Day, Lap, OutingSummary } from './schemas/days'
import type { Figures } from './figures'
import { asSentence, countInWords, numberInWords } from './utils/format'

export type Weather = 'dry' | 'wet'

/** Outings whose laps may share an axis: one layout, one car. */
export interface DayGroup {
  key: string
  layout: OutingSummary['layout']
  car: OutingSummary['car']
  outings: OutingSummary[]
  figures: LapFigures<DayLap>
  /** Set when dry and wet outings meet in the group: the figures are those of this weather alone. */
  figuresOf: Weather | null
}

export type DayLap = Lap & { outing: Pick<OutingSummary, 'id' | 'number' | 'setup'> }

/** Damp counts as wet: bests never mix the two. An outing that says nothing was dry. */
export function weatherOf(outing: Pick<OutingSummary, 'conditions'>): Weather {
  const wetness = outing.conditions.wetness
  return wetness === 'damp' || wetness === 'wet' ? 'wet' : 'dry'
}

/** The outings of a day by layout and car, in the order in which these first went out. */
export function dayGroups(outings: readonly OutingSummary[]): DayGroup[] {
  const byKey = new Map<string, OutingSummary[]>()
  for (const outing of outings) {
    const key = `${outing.layout.id} ${outing.car.id}`
    byKey.set(key, [...byKey.get(key) ?? [], outing])
  }
  return [...byKey].map(([key, members]) => {
    const figuresBy = (weather: Weather | null) => lapFigures(members
      .filter(outing => weather === null || weatherOf(outing) === weather)
      .map(outing => outing.laps.map(lap => ({ ...lap, outing }))))
    const dry = figuresBy('dry')
    const mixed = new Set(members.map(weatherOf)).size > 1
    const figuresOf = !mixed ? null : dry.counted.length > 0 ? 'dry' : 'wet'
    const { layout, car } = members[0]!
    return { key, layout, car, outings: members, figures: figuresBy(figuresOf), figuresOf }
  })
}

/** A sentence in pieces, so that quantities can be set in their own face. */
export type Sentence = (string | { fig: string })[]

/** What the day's sheet opens with: its finding, worked out from the laps. */
export function daySentence(
  day: Pick<Day, 'outings'>, groups: readonly DayGroup[], figures: Figures,
): Sentence {
  const outings = countInWords(day.outings.length, 'outing')
  if (day.outings.length === 0) return ['No outing on this sheet yet.']
  const counted = groups.reduce((sum, group) => sum + group.figures.counted.length, 0)
  const [fastest] = groups.filter(group => group.figures.best)
    .sort((a, b) => a.figures.best!.timeS - b.figures.best!.timeS)
  if (!fastest) return [`${asSentence(outings)}, and no lap that counts yet${waitingWords(day.outings)}.`]
  const best = fastest.figures.best!
  const where = groups.length > 1 ? ` in the ${fastest.car.name} on ${fastest.layout.name}` : ''
  return [
    `${asSentence(outings)}, `, { fig: figures.number(counted) }, ` ${counted === 1 ? 'lap counts' : 'laps count'}. Best `,
    { fig: figures.lapTime(best.timeS) }, `${where}, lap ${best.number} of outing ${best.outing.number}`,
    ...runnerUp(fastest, best, figures), '.',
  ]
}

function waitingWords(outings: readonly OutingSummary[]): string {
  const logs = outings.flatMap(outing => outing.logs)
  const of = (status: string) => logs.filter(log => log.status === status).length
  if (of('mapping') > 0) return `: ${countInWords(of('mapping'), 'log waits for its columns', 'logs wait for their columns')}`
  if (of('no_lines') > 0) return `: ${countInWords(of('no_lines'), 'log waits', 'logs wait')} for the timing lines`
  if (of('queued') + of('processing') > 0) return `: ${countInWords(of('queued') + of('processing'), 'log is', 'logs are')} being read`
  return ''
}

/** The other outing that came nearest to the best lap, and whether it ran another setup. */
function runnerUp(group: DayGroup, best: DayLap, figures: Figures): Sentence {
  const others = group.figures.counted.filter(lap => lap.outing.id !== best.outing.id)
  const [next] = others.sort((a, b) => a.timeS - b.timeS)
  if (!next) return []
  const behindS = shownDifferenceS(next.timeS, best.timeS)
  const setup = next.outing.setup.id === best.outing.setup.id ? '' : `, on revision ${next.outing.setup.number} instead of ${best.outing.setup.number}`
  if (behindS === 0) return [`; outing ${next.outing.number} did the same${setup}`]
  return [`; outing ${next.outing.number} came within `, { fig: `${figures.number(behindS, 3)} s` }, ` of it${setup}`]
}

/** What an outing's page opens with. */
export function outingSentence(
  outing: Pick<OutingSummary, 'number' | 'laps' | 'logs'>, figures: Figures,
): Sentence {
  const { counted, best, sumOfBestS } = lapFigures([outing.laps])
  const timed = outing.laps.filter(lap => lap.kind === 'timed').length
  if (!best) {
    const why = outing.logs.length === 0 ? ' has no log yet' : ` has no lap that counts yet${waitingWords([outing as OutingSummary])}`
    return [`Outing ${outing.number}${why}.`]
  }
  const laps = counted.length === timed ? `all of its ${countInWords(timed, 'lap')} count` : `${numberInWords(counted.length)} of its ${countInWords(timed, 'timed lap')} ${counted.length === 1 ? 'counts' : 'count'}`
  const left = sumOfBestS === null ? 0 : shownDifferenceS(best.timeS, sumOfBestS)
  return [
    `Outing ${outing.number} did `, { fig: figures.lapTime(best.timeS) }, ` on lap ${best.number}; `,
    timed === 1 ? 'it is the only timed lap' : laps,
    ...(left > 0 ? ['. Its best sectors together are ', { fig: `${figures.number(left, 3)} s` }, ' faster'] : []), '.',
  ]
}

/** Warmest and coolest track of a day, where they differ enough to matter to a comparison of laps. */
export function trackSpread(
  outings: readonly Pick<OutingSummary, 'number' | 'conditions'>[],
): { warm: number, cool: number, byC: number } | null {
  const measured = outings.flatMap(({ number, conditions: { trackC } }) => trackC === null ? [] : [{ number, trackC }])
  measured.sort((a, b) => a.trackC - b.trackC)
  const [cool, warm] = [measured[0], measured.at(-1)]
  if (!cool || !warm || warm.trackC - cool.trackC < 3) return null
  return { warm: warm.number, cool: cool.number, byC: warm.trackC - cool.trackC }
}
