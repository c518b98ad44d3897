import type { Gains } from '#shared/control/types'
import type { Complex } from '#shared/numerics/complex'
import type { ControllerForm } from '#shared/schemas/loop'

export interface ControllerFacts {
  label: string
  /** The names of its gains, in the order in which they are read. */
  gains: readonly string[]
  /** Whether its answers put a root exactly where the design point is; a single gain reaches the locus alone. */
  reachesEveryPoint: boolean
  /** What it begins with when it is chosen. */
  fresh: (designPoint: Complex) => ControllerForm
  /** What it makes of the error e (and for rate feedback of the output y), as the gains enter it; null where its name says it all. */
  law: string | null
  /** What its block in the diagram says, and how that is read aloud. */
  block: string
  spoken: string
}

/** The plain facts about each controller form, in the order in which the bench offers them. */
export const controllerForms: Readonly<Record<ControllerForm['form'], ControllerFacts>> = {
  gain: {
    label: 'one gain, k', gains: ['k'], reachesEveryPoint: false, fresh: () => ({ form: 'gain' }),
    law: null, block: 'k', spoken: 'the gain k',
  },
  pd: {
    label: 'proportional and derivative', gains: ['kp', 'kd'], reachesEveryPoint: true, fresh: () => ({ form: 'pd' }),
    law: 'u = (kp + kd s) e', block: 'kp + kd s', spoken: 'kp plus kd s',
  },
  pi: {
    label: 'proportional and integral', gains: ['kp', 'ki'], reachesEveryPoint: true, fresh: () => ({ form: 'pi' }),
    law: 'u = (kp + ki / s) e', block: 'kp + ki/s', spoken: 'kp plus ki over s',
  },
  rate: {
    label: 'proportional with rate feedback', gains: ['kp', 'kr'], reachesEveryPoint: true, fresh: () => ({ form: 'rate' }),
    law: 'u = kp e − kr s y', block: 'kp', spoken: 'the gain kp',
  },
  lead: {
    label: 'lead', gains: ['k', 'zero', 'pole'], reachesEveryPoint: true, fresh: () => ({ form: 'lead', poleZeroRatio: 10 }),
    law: 'u = k (s − zero) / (s − pole) e', block: 'k lead(s)', spoken: 'a lead with gain k',
  },
  pid: {
    label: 'proportional, integral and derivative', gains: ['kp', 'ki', 'kd'], reachesEveryPoint: true, fresh: () => ({ form: 'pid', integralToDerivativeRatio: 4 }),
    law: 'u = (kp + ki / s + kd s) e', block: 'PID', spoken: 'kp plus ki over s plus kd s',
  },
  lag: {
    label: 'lag', gains: ['k', 'zero', 'pole'], reachesEveryPoint: false, fresh: beneathPoint,
    law: 'u = k (s − zero) / (s − pole) e', block: 'k lag(s)', spoken: 'a lag with gain k',
  },
}

export const offeredForms = Object.keys(controllerForms) as ControllerForm['form'][]

/** A lag well below the design point, where it adds gain and takes little phase (common practice: a tenth of the natural frequency). */
function beneathPoint({ re, im }: Complex): ControllerForm {
  return { form: 'lag', poleZeroRatio: 0.1, zero: -Number((0.1 * Math.hypot(re, im)).toPrecision(2)) || -0.1 }
}

/** Whether gains are those of a form, by their names; those of a lead and of a lag have the same. */
export function areGainsOf(form: ControllerForm['form'], gains: Gains): boolean {
  const names = Object.keys(gains)
  return controllerForms[form].gains.length === names.length && controllerForms[form].gains.every(name => names.includes(name))
}
