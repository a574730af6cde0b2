import { checkNode } from './provision/node-version.mjs'
import { OWN_NAMES, readEnvironment } from './provision/environment.mjs'
import { startProduct } from './provision/product.mjs'
import { command, inSeconds, Refusal, say, step } from './provision/report.mjs'
import { onSignals } from './provision/signals.mjs'

await command(async () => {
  const startedAt = performance.now()
  const warning = checkNode()
  say(`Poleshelf starts on Node.js ${process.versions.node}.`)
  if (warning) say(`  ${warning}`)
  const reading = readEnvironment(process.env)
  if (!reading.ok) throw new Refusal(reading.sentences.join('\n'), 2)
  const settings = reading.value
  say(`  Data folder: ${settings.dataDir}`)

  const stopping = new AbortController()
  /** @type {Awaited<ReturnType<typeof startProduct>> | null} */
  let product = null
  let isStopped = false
  const stop = async (exitCode = 0) => {
    if (!product || isStopped) return
    isStopped = true
    await step('Stopping', () => product?.stop())
    say('Poleshelf has stopped; its data is kept.')
    process.exit(exitCode)
  }
  onSignals(
    () => {
      stopping.abort(new Refusal('The start was broken off; the next one goes on from here.', 130))
      void stop()
    },
    () => {
      product?.kill()
      process.exit(130)
    },
  )

  product = await startProduct({
    ...settings,
    settings: Object.fromEntries(OWN_NAMES.map((name) => [name, process.env[name] || undefined])),
    step,
    onTrouble: (sentence) => say(`  ${sentence}`),
    onGivenUp: (reason) => {
      process.stderr.write(`${reason}\n`)
      void stop(1)
    },
    signal: stopping.signal,
  })
  say(`Started in ${inSeconds(performance.now() - startedAt)}; Ctrl-C stops it.`)
  say(`Poleshelf is at ${product.address}`)
  for (const { role, email, password } of product.accounts) say(`${role} ${email} ${password}`)
})
