import { parentPort } from 'node:worker_threads'
import bcrypt from 'bcryptjs'

parentPort.on('message', ({ id, secret, cost, against }) => {
  const answer = against === undefined ? bcrypt.hashSync(secret, cost) : bcrypt.compareSync(secret, against)
  parentPort.postMessage({ id, answer })
})
