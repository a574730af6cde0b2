import { z } from 'zod'
import { BlockCode, BlockFunction } from './names'

const Word = z.string().trim().min(1).max(60)

/** Metadata of a block: YAML front matter in files, columns in the database. */
export const FrontMatter = z.strictObject({
  format: z.literal(1, 'This page states a format that is not read here; format 1 is.'),
  code: BlockCode,
  title: z.string().trim().min(1).max(120),
  function: BlockFunction,
  topology: Word,
  order: z.number().int().min(0).max(20),
  tags: z.array(Word).max(20).default([]),
  aliases: z.array(Word).max(40).default([]),
  owner: z.string().trim().min(1).max(80),
  summary: z.string().trim().min(1).max(300),
})
export type FrontMatter = z.output<typeof FrontMatter>
