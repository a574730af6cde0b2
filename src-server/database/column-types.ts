import { customType, datetime } from 'drizzle-orm/mysql-core'
import type { z } from 'zod'

/**
 * A JSON column whose shape is a schema, checked on writing and on reading: MariaDB hands JSON back as text.
 * @throws {Error} when what is stored does not have the shape
 */
export function jsonOf<S extends z.ZodType>(schema: S) {
  return customType<{ data: z.output<S>; driverData: string }>({
    dataType: () => 'json',
    toDriver: (value) => JSON.stringify(value),
    fromDriver: (stored) => schema.parse(typeof stored === 'string' ? JSON.parse(stored) : stored) as z.output<S>,
  })()
}

/** An instant to the millisecond, UTC on both sides. */
export const instant = () => datetime({ fsp: 3, mode: 'date' })
