import { describe, expect, it } from 'vitest'
import { toCsv } from '../../shared/csv.ts'

describe('rows as CSV', () => {
  it('end in CRLF and quote what holds a comma, a quote or a line break (RFC 4180)', () => {
    expect(toCsv([['a', 'b, c', 'say "x"', 'two\nlines']])).toBe('a,"b, c","say ""x""","two\nlines"\r\n')
  })

  it('keep a number with its sign and leave a missing value empty', () => {
    expect(toCsv([[-1.5, null, Number.NaN]])).toBe('-1.5,,\r\n')
  })

  it('never start a text cell as a formula', () => {
    expect(toCsv([['=1+1', '@x', '-y']])).toBe("'=1+1,'@x,'-y\r\n")
  })
})
