import { z } from 'zod/v4'

// Zod speeds objects up with code made at run time, which the content security policy forbids. Set before any schema
// is made: in the client every import of zod comes here.
z.config({ jitless: true })

export * from 'zod/v4'
export { z }
