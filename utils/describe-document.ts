import type { ScenarioDocument } from '#shared/schemas/document'
import type { Plant } from '#shared/schemas/loop'

export interface Difference {
  what: string
  mine: string
  theirs: string
}

interface Described {
  title: string
  machine: string
  axis: string
  document: ScenarioDocument
}

/** What differs between two versions of a scenario, in words an engineer can choose by. */
export function differences(mine: Described, theirs: Described): Difference[] {
  const ours = describe(mine)
  const others = describe(theirs)
  return Object.entries(ours)
    .map(([what, words]) => ({ what, mine: words, theirs: others[what] ?? '' }))
    .filter(line => line.mine !== line.theirs)
}

function describe({ title, machine, axis, document }: Described): Record<string, string> {
  return {
    'Title': title,
    'Machine': machine || 'none',
    'Axis': axis || 'none',
    'Design point': describePoint(document.designPoint),
    'Plant': describePlant(document.loop.plant),
    'Inner rate feedback': figure(document.loop.rateFeedback ?? 0),
    'Controller': describeController(document.controller),
    'Requirements': describeRequirements(document.requirements),
    'Notes': document.notes || 'none',
  }
}

function describePoint(point: ScenarioDocument['designPoint']): string {
  if ('dampingRatio' in point) return `damping ratio ${figure(point.dampingRatio)}, natural frequency ${figure(point.naturalFrequency)} rad/s`
  const frequency = Math.hypot(point.re, point.im)
  return `${figure(point.re)} + ${figure(point.im)}j (damping ratio ${figure(frequency === 0 ? 0 : -point.re / frequency)}, ${figure(frequency)} rad/s)`
}

function describePlant(plant: Plant): string {
  switch (plant.form) {
    case 'expression': {
      const parameters = Object.entries(plant.parameters).map(([name, { value, unit }]) => `${name} = ${figure(value)}${unit ? ` ${unit}` : ''}`)
      return [plant.expression, ...parameters].join(', ')
    }
    case 'coefficients':
      return `(${plant.numerator.map(figure).join(', ')}) / (${plant.denominator.map(figure).join(', ')})`
    case 'zeros-poles-gain':
      return `gain ${figure(plant.gain)}, zeros ${plant.zeros.map(place).join(', ') || 'none'}, poles ${plant.poles.map(place).join(', ') || 'none'}`
  }
}

function describeController(controller: ScenarioDocument['controller']): string {
  switch (controller.form) {
    case 'gain': return controller.shape ? `one gain, shape (${controller.shape.numerator.map(figure).join(', ')}) / (${controller.shape.denominator.map(figure).join(', ')})` : 'one gain'
    case 'pd': return 'proportional and derivative'
    case 'pi': return 'proportional and integral'
    case 'rate': return 'proportional with rate feedback'
    case 'lead': return `lead, pole-zero ratio ${figure(controller.poleZeroRatio)}`
    case 'lag': return `lag, pole-zero ratio ${figure(controller.poleZeroRatio)}, zero ${figure(controller.zero)}`
    case 'pid': return 'proportional, integral and derivative'
  }
}

function describeRequirements(requirements: ScenarioDocument['requirements']): string {
  return requirements.map(({ reading, limit, value }) => `${readingWords(reading)} ${limit === 'at-most' ? 'at most' : 'at least'} ${figure(value)}`).join('; ') || 'none'
}

const words: Record<string, string> = {
  overshootPercent: 'overshoot', settlingTime: 'settling time', riseTime: 'rise time', peakTime: 'peak time', peakEffort: 'peak effort',
  steadyStateErrorStep: 'steady-state error (step)', steadyStateErrorRamp: 'steady-state error (ramp)', gainMarginDb: 'gain margin',
  phaseMarginDeg: 'phase margin', delayMargin: 'delay margin', sensitivityPeak: 'sensitivity peak', bandwidth: 'bandwidth', dampingRatio: 'damping ratio',
}

export const readingWords = (reading: string): string => words[reading] ?? reading

function place({ re, im }: { re: number, im: number }): string {
  return im === 0 ? figure(re) : `${figure(re)} ${im < 0 ? '−' : '+'} ${figure(Math.abs(im))}j`
}

/** Four significant digits, with a true minus sign. */
function figure(value: number): string {
  return String(Number(value.toPrecision(4))).replace('-', '−')
}
