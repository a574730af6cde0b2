import { PiniaColada, useQueryCache } from '@pinia/colada'
import type { App } from 'vue'
import { listenToApi } from '../queries/api-events'
import { useConnection } from '../stores/connection'
import { useSession } from '../stores/session'
import { useSettings } from '../stores/settings'

/** Connects server state and the calls with the stores that show how they fare. */
export default ({ app }: { app: App }) => {
  app.use(PiniaColada, { queryOptions: { gcTime: 600_000, refetchOnWindowFocus: true } })
  useSettings()
  const connection = useConnection()
  const session = useSession()
  const cache = useQueryCache()
  listenToApi({
    answered: connection.answered,
    unreachable: connection.unreachable,
    databaseAway: connection.databaseAway,
    signInNeeded: session.ask,
  })
  connection.onBack(() => void cache.invalidateQueries({ status: 'error' }))
}
