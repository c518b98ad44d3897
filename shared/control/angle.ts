/** An angle brought to (-pi, pi] by whole turns. */
export function wrapAngle(radians: number): number {
  const turn = 2 * Math.PI
  const wrapped = radians - turn * Math.round(radians / turn)
  return wrapped <= -Math.PI ? wrapped + turn : wrapped
}

/** An angle in radians as degrees, not wrapped. */
export function toDegrees(radians: number): number {
  return radians * 180 / Math.PI
}
