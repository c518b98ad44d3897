import { solveDesign } from '#shared/control/solve'
import { parseFormula } from '../utils/expression/parse-formula'

/** The formula parser is large and loads slowly, and the engine runs faster once compiled: both before the first hand is on the point. */
export default defineNitroPlugin(() => {
  const plant = parseFormula({ expression: 'k/(s*(s+1)*(s+2))', parameters: { k: { value: 1, unit: 'm/(s V)' } } }, '')
  for (let round = 0; round < 30; round += 1) {
    solveDesign({ plant, rateFeedback: 0 }, { form: 'gain' }, { designPoint: { re: -0.3, im: 0.5 + round / 100 } })
  }
})
