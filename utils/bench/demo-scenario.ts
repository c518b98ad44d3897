import type { ScenarioDocument } from '#shared/schemas/document'

/**
 * The axis on the bench at a first visit: the slew drive of a harbour crane, current in, angle out. The design point lies where the ray of
 * damping ratio 0.6 meets the locus.
 */
export const demoScenario: { title: string, machine: string, axis: string, document: ScenarioDocument } = {
  title: 'First tuning',
  machine: 'Quay crane 2',
  axis: 'Slew axis',
  document: {
    loop: {
      plant: {
        form: 'expression',
        expression: 'kt / (s*(J*s + b)*(T*s + 1))',
        parameters: {
          kt: { value: 26000, unit: 'N m/A' },
          J: { value: 2.4e6, unit: 'kg m^2', tolerancePercent: 20 },
          b: { value: 3.0e6, unit: 'N m s', tolerancePercent: 30 },
          T: { value: 0.09, unit: 's', tolerancePercent: 10 },
        },
      },
    },
    controller: { form: 'gain' },
    designPoint: { re: -0.5783333200917377, im: 0.7711110934556503 },
    requirements: [
      { reading: 'overshootPercent', limit: 'at-most', value: 12 },
      { reading: 'settlingTime', limit: 'at-most', value: 7 },
      { reading: 'phaseMarginDeg', limit: 'at-least', value: 55 },
      { reading: 'gainMarginDb', limit: 'at-least', value: 12 },
      { reading: 'steadyStateErrorRamp', limit: 'at-most', value: 1.5 },
    ],
    notes: '',
  },
}
