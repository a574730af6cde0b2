import { describe, expect, it } from 'vitest'
import { sketchPath } from '../../../src/components/shelf/sketch-path'

describe('the sketch of a response', () => {
  it('puts the highest figure at the top and 40 dB less at the foot', () =>
    expect(sketchPath([6, 6, -14, -34], 60, 20)).toBe('M0 0L20 0L40 10L60 20'))

  it('keeps what lies deeper on the foot', () => expect(sketchPath([0, -40, -120], 60, 26)).toBe('M0 0L30 26L60 26'))

  it('draws a notch without a figure at the foot', () =>
    expect(sketchPath([0, -Infinity, 0], 60, 26)).toBe('M0 0L30 26L60 0'))

  it.each([[[]], [[3]]])('draws nothing from %j', (figures) => expect(sketchPath(figures, 60, 26)).toBe(''))
})
