import closeWithGrace from 'close-with-grace'
import { assemble } from './app/assemble'
import { readConfiguration } from './app/configuration'
import { drain, listen, makeServer } from './app/listen'
import { openLog } from './app/log'

const STOP_WITHIN_MS = 9500

const reading = readConfiguration(process.env)
if (!reading.ok) {
  for (const { detail } of reading.problems) process.stderr.write(`${detail}\n`)
  process.exit(2)
}
const configuration = reading.value
const log = openLog(configuration)
for (const warning of configuration.warnings) {
  log.warn(warning)
  process.stderr.write(`${warning}\n`)
}

const server = makeServer()
const address = await listen(server, configuration.host, configuration.port).catch((error: NodeJS.ErrnoException) => {
  const reason =
    error.code === 'EADDRINUSE' ? 'is taken; PORT chooses another' : `cannot be listened on (${error.code})`
  process.stderr.write(`${configuration.host}:${configuration.port} ${reason}.\n`)
  process.exit(3)
})
const assembly = await assemble({ configuration, baseUrl: configuration.baseUrl ?? address, log })
server.on('request', assembly.app)
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
