/** A complex number as it travels in JSON. Functions on it live beside it; none of them changes its arguments. */
export interface Complex {
  re: number
  im: number
}
