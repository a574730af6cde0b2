import { describe, expect, it } from 'vitest'
import type { ShelfRow } from '#shared/contracts/blocks'
import { foundReason } from '../../../src/components/shelf/found-reason'

const row = (found: ShelfRow['found']): ShelfRow => ({
  code: 'lp2-mfb',
  title: 'Low-pass, second order, with gain',
  function: 'low-pass',
  topology: 'multiple-feedback',
  order: 2,
  revision: 1,
  revisions: 1,
  status: 'approved',
  owner: 'Analog group',
  author: 'A. Writer',
  approvedBy: 'L. Lead',
  date: '2026-12-01T10:00:00Z',
  summary: 'Use it ahead of a converter.',
  tags: ['anti-alias'],
  aliases: ['Rauch', 'infinite gain'],
  state: 'active',
  sketchDb: [],
  found,
})

describe('why a row matched', () => {
  it('goes without saying when the row shows every word', () =>
    expect(foundReason(row({ words: ['mfb', 'gain'], in: 'title', excerpt: 'x' }))).toBeNull())

  it('is the name that the block also goes by', () =>
    expect(foundReason(row({ words: ['rau'], in: 'names and tags', excerpt: 'lp2-mfb Rauch' }))).toEqual({
      place: 'Also called',
      text: 'Rauch',
    }))

  it('is its function when the trade has another word for that', () =>
    expect(foundReason(row({ words: ['lpf'], in: 'names and tags', excerpt: 'lpf lp' }))).toEqual({
      place: 'Found by its function,',
      text: 'low-pass',
    }))

  it('is the text around the words in the notes', () =>
    expect(foundReason(row({ words: ['slew'], in: 'notes', excerpt: '… its slew rate …' }))).toEqual({
      place: 'Found in notes:',
      text: '… its slew rate …',
    }))

  it('is nothing without a search', () => expect(foundReason(row(null))).toBeNull())
})
