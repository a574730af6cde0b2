import { describe, expect, it } from 'vitest'
import { partsListCsv } from '#shared/csv/parts-list'
import { responseCsv } from '#shared/csv/response'
import { csvText } from '#shared/csv/write-csv'
import { ProblemError } from '#shared/problems'

const one = (cell: string | number | null) => csvText([[cell]]).slice(0, -2)

describe('csvText', () => {
  // Source: RFC 4180, section 2, rules 1 to 7.
  it('parts fields by commas, ends each row by CRLF and doubles quotes', () => {
    expect(
      csvText([
        ['aaa', 'b "b" b'],
        ['a,b', 'line\nbreak', 'cr\rhere', null, ''],
      ]),
    ).toBe('aaa,"b ""b"" b"\r\n"a,b","line\nbreak","cr\rhere",,\r\n')
    expect(csvText([])).toBe('')
    expect(one(' 4k7 ')).toBe('" 4k7 "')
  })
  it.each([
    ['=HYPERLINK("http://x")', '"\'=HYPERLINK(""http://x"")"'],
    ['+1', "'+1"],
    ['-3.01', "'-3.01"],
    ['@x', "'@x"],
    ['\tx', "'\tx"],
    ['\0x', "'\0x"],
    ['\r=1', '"\'\r=1"'],
    ['＝1', "'＝1"],
    ['R1=2', 'R1=2'],
    ["'x", "'x"],
  ])('puts an apostrophe before text that could be a formula: %j', (text, written) => expect(one(text)).toBe(written))
  it.each([
    [-3.01, '-3.01'],
    [4.7e-9, '4.7e-9'],
    [-0, '0'],
    [1e21, '1e+21'],
    [0.1 + 0.2, '0.30000000000000004'],
  ])('keeps the number %d a number', (value, written) => expect(one(value)).toBe(written))
  it.each([NaN, Infinity, -Infinity])('refuses %d', (value) => expect(() => one(value)).toThrow(ProblemError))
})

it('writes a parts list, a line a designator', () => {
  const text = partsListCsv([
    { ref: 'R1', value: 4700, unit: 'Ω', tolerance: 0.01, series: 'E96', stockNumber: '=1+1', note: 'near, "hot"' },
    { ref: 'U1', value: null, unit: '' },
  ])
  expect(text).toBe(
    'part,value,unit,tolerance,series,stockNumber,note\r\n' +
      'R1,4700,Ω,0.01,E96,\'=1+1,"near, ""hot"""\r\n' +
      'U1,,,,,,\r\n',
  )
})

it('writes a response, a line a frequency, and leaves the dB of a zero empty', () => {
  const curve = { name: 'out', re: [1, 0], im: [0, 0], phaseRad: [0, -7] }
  expect(responseCsv([10, 1e3], [curve, { ...curve, name: '-x' }])).toBe(
    "frequencyHz,out re,out im,out gainDb,out phaseRad,'-x re,'-x im,'-x gainDb,'-x phaseRad\r\n" +
      '10,1,0,0,0,1,0,0,0\r\n1000,0,0,,-7,0,0,,-7\r\n',
  )
})
