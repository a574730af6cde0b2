/** What can be built at all, in SI units; outside it a value is a slip of the pen. Common practice. */
export const BUILDABLE = { Ω: [1e-3, 1e12], F: [1e-17, 10], H: [1e-12, 1e4] } as const
