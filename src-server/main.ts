import type { RequestListener } from 'node:http'
import closeWithGrace from 'close-with-grace'
import { assemble } from './app/assemble'
import { readConfiguration, type Configuration } from './app/configuration'
import { drain, listen, makeServer } from './app/listen'
import { openLog } from './app/log'

const STOP_WITHIN_MS = 9500

/** Ends the start with a sentence for whoever started it. */
function giveUp(sentence: string, exitCode: number): never {
  process.stderr.write(`${sentence}\n`)
  process.exit(exitCode)
}

async function serve(configuration: Configuration): Promise<void> {
  const log = openLog(configuration)
  for (const warning of configuration.warnings) {
    log.warn(warning)
    process.stderr.write(`${warning}\n`)
  }
  const server = makeServer()
  // Who asks while the rest is still being put together is answered once it is.
  let serveWith: (app: RequestListener) => void = () => {}
  const app = new Promise<RequestListener>((resolve) => (serveWith = resolve))
  server.on('request', (request, response) => void app.then((handle) => handle(request, response)))
  const address = await listen(server, configuration.host, configuration.port).catch((error: NodeJS.ErrnoException) => {
    const reason =
      error.code === 'EADDRINUSE' ? 'is taken; PORT chooses another' : `cannot be listened on (${error.code})`
    return giveUp(`${configuration.host}:${configuration.port} ${reason}.`, 3)
  })
  const assembly = await assemble({ configuration, baseUrl: configuration.baseUrl ?? address, log })
  serveWith(assembly.app)
  void assembly.prepare().catch((error: unknown) => log.error({ err: error }, 'start failed'))

  closeWithGrace({ delay: STOP_WITHIN_MS, logger: false }, async ({ signal, err }) => {
    if (err) log.fatal({ err }, 'stopping after an error that nobody caught')
    else log.info({ signal }, 'stopping')
    assembly.beginStop()
    await drain(server)
    await assembly.close()
    log.info('stopped')
  })

  log.info({ address }, 'listening')
  process.stdout.write(`POLESHELF_READY ${JSON.stringify({ address })}\n`)
}

const reading = readConfiguration(process.env)
if (!reading.ok) giveUp(reading.problems.map((one) => one.detail).join('\n'), 2)
await serve(reading.value).catch((error: NodeJS.ErrnoException) =>
  giveUp(
    error.code === 'ENOSPC'
      ? `There is no space left for the data folder ${reading.value.dataDir}; free some, then start again.`
      : error.code === 'EACCES' || error.code === 'EROFS' || error.code === 'ENOTDIR'
        ? `The data folder ${reading.value.dataDir} cannot be written (${error.code}); DATA_DIR chooses another.`
        : `The start failed: ${error.message}`,
    4,
  ),
)
