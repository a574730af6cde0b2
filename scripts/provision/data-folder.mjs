import { chmodSync, existsSync, mkdirSync, statfsSync, statSync } from 'node:fs'
import { dirname } from 'node:path'
import { Refusal } from './report.mjs'

const MEGABYTE = 1024 * 1024

/**
 * Makes the data folder, readable by its owner alone.
 * @throws {Refusal} when that cannot be
 */
export function prepareDataFolder(dataDir) {
  try {
    mkdirSync(dataDir, { recursive: true, mode: 0o700 })
    chmodSync(dataDir, 0o700)
  } catch (error) {
    throw new Refusal(
      `The data folder ${dataDir} cannot be made or used (${error.code}); DATA_DIR chooses another, which must be yours.`,
    )
  }
  if (!statSync(dataDir).isDirectory()) throw new Refusal(`DATA_DIR ${dataDir} is not a folder.`)
}

/**
 * @param {string} folder it, or the nearest folder above that exists, is asked
 * @param {number} neededMegabytes @param {string} wayOut
 * @throws {Refusal} when less is free
 */
export function requireSpace(folder, neededMegabytes, wayOut) {
  let place = folder
  while (!existsSync(place)) place = dirname(place)
  const { bavail, bsize } = statfsSync(place)
  const free = Math.floor((bavail * bsize) / MEGABYTE)
  if (free < neededMegabytes)
    throw new Refusal(`Only ${free} MB are free at ${folder}, and ${neededMegabytes} MB are needed: ${wayOut}.`)
}
