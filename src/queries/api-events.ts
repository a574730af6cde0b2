/** What the calls tell the rest of the client; boot/server-state.ts connects the stores. */
export interface ApiListener {
  answered: () => void
  unreachable: () => void
  databaseAway: (sentence: string) => void
  /** Asks the person to sign in over the page; resolves to whether they did. */
  signInNeeded: () => Promise<boolean>
}

let listener: ApiListener | null = null

/** Connects the one listener. */
export function listenToApi(to: ApiListener): void {
  listener = to
}

export const tell: ApiListener = {
  answered: () => listener?.answered(),
  unreachable: () => listener?.unreachable(),
  databaseAway: (sentence) => listener?.databaseAway(sentence),
  signInNeeded: async () => (await listener?.signInNeeded()) ?? false,
}
