import type { Issue } from '#shared/schemas/errors'

const words: readonly [prefix: string, said: string][] = [
  ['loop.plant.expression', 'Formula'],
  ['loop.plant.numerator', 'Numerator'],
  ['loop.plant.denominator', 'Denominator'],
  ['loop.plant.zeros', 'Zeros'],
  ['loop.plant.poles', 'Poles'],
  ['loop.plant.gain', 'Gain of the plant'],
  ['loop.plant', 'Plant'],
  ['loop.sensor', 'Sensor'],
  ['loop.rateFeedback', 'Rate feedback'],
  ['loop.deadTime', 'Dead time'],
  ['loop.actuatorLimit', 'Actuator limit'],
  ['loop.samplePeriod', 'Sample period'],
  ['loop.computingDelay', 'Computing delay'],
  ['controller.shape', 'Controller shape'],
  ['controller', 'Controller'],
  ['designPoint', 'Design point'],
  ['gains', 'Gains'],
]

/** A field of a request by the name it has on the bench. */
export function sayField(path: string): string | null {
  const parameter = /^loop\.plant\.parameters\.([^.]+)/.exec(path)
  if (parameter) return `Parameter ${parameter[1]}`
  const requirement = /^requirements\.(\d+)/.exec(path)
  if (requirement) return `Requirement ${Number(requirement[1]) + 1}`
  return words.find(([prefix]) => path === prefix || path.startsWith(`${prefix}.`))?.[1] ?? null
}

/** What is wrong, with the field named as the bench names it. */
export function sayIssue({ path, message }: Pick<Issue, 'path' | 'message'>): string {
  const field = sayField(path)
  return field === null ? message : `${field}: ${message}`
}
