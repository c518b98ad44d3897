/** The axes of an invented quay crane, as the demo team keeps them. */

const slewPlant = {
  form: 'expression',
  expression: 'kt / (s*(J*s + b)*(T*s + 1))',
  parameters: {
    kt: { value: 26000, unit: 'N m/A', tolerancePercent: 5 },
    J: { value: 4.1e6, unit: 'kg m^2', tolerancePercent: 15 },
    b: { value: 3.0e6, unit: 'N m s', tolerancePercent: 30 },
    T: { value: 0.09, unit: 's', tolerancePercent: 10 },
  },
}

export const scenarios = [
  {
    title: 'Hoist winch speed',
    machine: 'Quay crane 2',
    axis: 'Hoist',
    document: {
      loop: { plant: { form: 'coefficients', numerator: [2.4], denominator: [0.18, 1] } },
      controller: { form: 'pi' },
      designPoint: { dampingRatio: 0.7, naturalFrequency: 9 },
      requirements: [
        { reading: 'overshootPercent', limit: 'at-most', value: 10 },
        { reading: 'settlingTime', limit: 'at-most', value: 0.8 },
        { reading: 'steadyStateErrorStep', limit: 'at-most', value: 0.001 },
      ],
      notes: 'Speed loop of the winch: volts in, metres per second out. Model from the run-up of the empty spreader.',
    },
  },
  {
    title: 'Trolley travel with rate feedback',
    machine: 'Quay crane 2',
    axis: 'Trolley',
    document: {
      loop: { plant: { form: 'zeros-poles-gain', zeros: [], poles: [{ re: 0, im: 0 }, { re: -0.8, im: 0 }], gain: 0.35 } },
      controller: { form: 'rate' },
      designPoint: { dampingRatio: 0.7, naturalFrequency: 1.4 },
      requirements: [
        { reading: 'overshootPercent', limit: 'at-most', value: 5 },
        { reading: 'settlingTime', limit: 'at-most', value: 5 },
      ],
      notes: '',
    },
  },
  {
    title: 'Boom luffing with lead',
    machine: 'Quay crane 2',
    axis: 'Luffing',
    document: {
      loop: {
        plant: {
          form: 'expression',
          expression: 'kv / (s*(Tm*s + 1)*(Th*s + 1))',
          parameters: {
            kv: { value: 0.9, unit: 'rad/(s V)', tolerancePercent: 5 },
            Tm: { value: 0.5, unit: 's', tolerancePercent: 20 },
            Th: { value: 0.08, unit: 's', tolerancePercent: 10 },
          },
        },
      },
      controller: { form: 'lead', poleZeroRatio: 8 },
      designPoint: { dampingRatio: 0.6, naturalFrequency: 2.4 },
      requirements: [
        { reading: 'settlingTime', limit: 'at-most', value: 2.5 },
        { reading: 'overshootPercent', limit: 'at-most', value: 12 },
        { reading: 'phaseMarginDeg', limit: 'at-least', value: 50 },
      ],
      notes: 'The rule of thumb says 9.5 %; the zero of the lead makes it more. See the readings.',
    },
  },
  // The last one saved stands first in the table, and is the one that is shared.
  {
    title: 'Slew axis, full container',
    machine: 'Quay crane 2',
    axis: 'Slew axis',
    document: {
      loop: { plant: slewPlant },
      controller: { form: 'gain' },
      designPoint: { re: -0.3495545730186179, im: 0.4660727640248239 },
      requirements: [
        { reading: 'overshootPercent', limit: 'at-most', value: 12 },
        { reading: 'settlingTime', limit: 'at-most', value: 12 },
        { reading: 'phaseMarginDeg', limit: 'at-least', value: 55 },
      ],
      notes: 'Forty tonnes at full outreach. The empty hook needs about half this inertia.',
    },
  },
]

/** What was said about the shared scenario; a reply follows the comment it answers. */
export const discussion = [
  {
    guest: 'Pell Aldous',
    comment: { body: 'With the wind on the container we saw it swing past at this gain. Is there room to go slower?', anchor: { kind: 'response', time: 6.5 } },
    reply: 'There is. The overshoot here is the figure of the whole loop, without wind; I will try 0.7.',
  },
  {
    guest: 'Pell Aldous',
    comment: { body: 'How about this point instead?', anchor: { kind: 'plane', re: -0.36, im: 0.36 }, designPoint: { re: -0.36, im: 0.36 } },
  },
  {
    guest: 'Sunniva Roe',
    comment: { body: 'Seven metres of rope behind the boom tip: does the model know?', anchor: { kind: 'reading', reading: 'settlingTime' } },
    reply: 'No, the swing of the load is not in it. Noted for the next model.',
    resolved: true,
  },
]
