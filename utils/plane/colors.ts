/** The colours of the drawing, taken from the style sheet, so that there is one list of them. Each is "r g b", ready for an alpha. */
export interface PlaneColors {
  paper: string
  ink: string
  hairline: string
  brass: string
  brassInk: string
  vermilion: string
  vermilionInk: string
  sea: string
  slate: string
}

export function readColors(): PlaneColors {
  const style = getComputedStyle(document.documentElement)
  const channel = (name: string) => style.getPropertyValue(`--${name}`).trim()
  return {
    paper: channel('paper'),
    ink: channel('ink'),
    hairline: channel('hairline'),
    brass: channel('brass'),
    brassInk: channel('brass-ink'),
    vermilion: channel('vermilion'),
    vermilionInk: channel('vermilion-ink'),
    sea: channel('sea'),
    slate: channel('slate'),
  }
}

/** The colours of the day theme whatever the present one: paper is white in the printer. */
export function readDayColors(): PlaneColors {
  const { dataset } = document.documentElement
  const theme = dataset.theme
  // Set rather than removed: without a theme the page follows the system.
  dataset.theme = 'day'
  const colors = readColors()
  if (theme === undefined) delete dataset.theme
  else dataset.theme = theme
  return colors
}

export function paint(channels: string, alpha = 1): string {
  return alpha === 1 ? `rgb(${channels})` : `rgb(${channels} / ${alpha})`
}
