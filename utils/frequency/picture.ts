import type { FrequencyAnswer } from './answer'
import { drawLoopPane } from './loop-pane'
import { decadesSpanned, type Pane, type PaneName } from './pane'
import { drawSensitivityPane } from './sensitivity-pane'

const margin = { left: 44, angles: 44, right: 14, top: 24, bottom: 22 }

/** What the frequency view draws: both panes side by side, or `only` one of them. */
export function drawFrequency(answer: FrequencyAnswer, { width, height }: { width: number, height: number }, only: PaneName | null): Pane[] {
  const upright = { top: margin.top, bottom: height - margin.bottom, along: decadesSpanned(answer.response) }
  const half = only === null ? width / 2 : 0
  const loop = () => drawLoopPane(answer, { ...upright, left: margin.left, right: (half || width) - margin.angles })
  const sensitivity = () => drawSensitivityPane(answer, { ...upright, left: half + margin.left, right: width - margin.right })
  if (only === null) return [loop(), sensitivity()]
  return [only === 'loop' ? loop() : sensitivity()]
}
