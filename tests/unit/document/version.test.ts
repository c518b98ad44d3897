import { describe, expect, it } from 'vitest'
import { documentVersion } from '#shared/document/format'
import { readDocument } from '#shared/document/version'
import { slewDocument } from '../../fixtures/document'

/** A history of two changes: the notes were once called remarks, and once a list. */
const steps = {
  1: ({ remarks, ...rest }: Record<string, unknown>) => ({ ...rest, notes: remarks }),
  2: ({ notes, ...rest }: Record<string, unknown>) => ({ ...rest, notes: (notes as string[]).join('\n') }),
}
const { notes: _, ...plain } = slewDocument

describe('reading a saved document', () => {
  it('takes the present format as it is', () => {
    expect(readDocument(slewDocument, documentVersion)).toEqual(slewDocument)
  })

  it('walks an older one through every later format', () => {
    const present = { ...slewDocument, notes: 'one\ntwo' }
    expect(readDocument({ ...plain, remarks: ['one', 'two'] }, 1, steps, 3)).toEqual(present)
    expect(readDocument({ ...plain, notes: ['one', 'two'] }, 2, steps, 3)).toEqual(present)
    expect(readDocument(present, 3, steps, 3)).toEqual(present)
  })

  it.each([0, 4, 1.5, Number.NaN])('refuses format %d, which it does not know', (version) => {
    expect(() => readDocument(slewDocument, version, steps, 3)).toThrow('reads formats 1 to 3')
  })

  it('refuses a gap in the history, and a document that does not fit', () => {
    expect(() => readDocument(slewDocument, 1, { 2: steps[2] }, 3)).toThrow('no way from document format 1 to 2')
    expect(() => readDocument({ ...slewDocument, colour: 'red' }, documentVersion)).toThrow()
  })
})
