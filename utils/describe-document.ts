import { dampingRatioOf } from '#shared/control/design-point'
import { abs, type Complex } from '#shared/numerics/complex'
import type { ScenarioDocument } from '#shared/schemas/document'
import type { Plant } from '#shared/schemas/loop'
import { requirementWords } from '~/utils/anchor-words'
import { formatSpan } from '~/utils/bench/actuation-words'
import { controllerForms } from '~/utils/bench/controller-forms'
import { formatComplex, formatPlain } from '~/utils/bench/format'

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
    'Sensor': document.loop.sensor ? describePlant(document.loop.sensor) : 'none',
    'Inner rate feedback': figure(document.loop.rateFeedback ?? 0),
    'Dead time': document.loop.deadTime ? formatSpan(document.loop.deadTime) : 'none',
    'Actuator limit': document.loop.actuatorLimit === undefined ? 'none' : figure(document.loop.actuatorLimit),
    'Sample period': document.loop.samplePeriod === undefined ? 'none, a continuous controller' : formatSpan(document.loop.samplePeriod),
    'Computing delay': document.loop.computingDelay === 'one-sample' ? 'one sample' : 'none',
    'Controller': describeController(document.controller),
    'Requirements': describeRequirements(document.requirements),
    'Notes': document.notes || 'none',
  }
}

function describePoint(point: ScenarioDocument['designPoint']): string {
  if ('dampingRatio' in point) return `damping ratio ${figure(point.dampingRatio)}, natural frequency ${figure(point.naturalFrequency)} rad/s`
  return `${place(point)} (damping ratio ${figure(dampingRatioOf(point))}, ${figure(abs(point))} rad/s)`
}

export function describePlant(plant: Plant): string {
  switch (plant.form) {
    case 'expression': {
      const parameters = Object.entries(plant.parameters).map(([name, { value, unit }]) => `${name} = ${figure(value)}${unit ? ` ${unit}` : ''}`)
      return [plant.expression, ...parameters].join(', ')
    }
    case 'coefficients':
      return describeRatio(plant)
    case 'zeros-poles-gain':
      return `gain ${figure(plant.gain)}, zeros ${plant.zeros.map(place).join(', ') || 'none'}, poles ${plant.poles.map(place).join(', ') || 'none'}`
  }
}

function describeRatio({ numerator, denominator }: { numerator: number[], denominator: number[] }): string {
  return `(${numerator.map(figure).join(', ')}) / (${denominator.map(figure).join(', ')})`
}

function describeController(controller: ScenarioDocument['controller']): string {
  const { label } = controllerForms[controller.form]
  switch (controller.form) {
    case 'gain': return controller.shape ? `${label}, shape ${describeRatio(controller.shape)}` : label
    case 'lead': return `${label}, pole-zero ratio ${figure(controller.poleZeroRatio)}${alternativeWords(controller)}`
    case 'lag': return `${label}, pole-zero ratio ${figure(controller.poleZeroRatio)}, zero ${figure(controller.zero)}`
    case 'pd': return label + filterWords(controller)
    case 'pid': return `${label}, ${controller.thirdPole === undefined ? `Ti/Td ${figure(controller.integralToDerivativeRatio ?? NaN)}` : `third root ${figure(controller.thirdPole)} rad/s`}${filterWords(controller)}${alternativeWords(controller)}`
    default: return label
  }
}

function filterWords({ derivativeFilter }: { derivativeFilter?: number }): string {
  return derivativeFilter === undefined ? '' : `, derivative filter ${figure(derivativeFilter)} s`
}

function alternativeWords({ alternative = 0 }: { alternative?: number }): string {
  return alternative === 0 ? '' : `, gains ${alternative + 1} of those that reach the point`
}

function describeRequirements(requirements: ScenarioDocument['requirements']): string {
  return requirements.map(requirementWords).join('; ') || 'none'
}

/** Four significant digits tell two versions apart and stay readable. */
const digits = 4
const figure = (value: number) => formatPlain(value, digits)
const place = (at: Complex) => formatComplex(at, digits)
