import type { Me } from '#shared/contracts/people'

/** Whoever is signed in, as handlers and services get them. */
export interface SignedIn extends Me {
  id: number
}

export { peopleRepository, type PeopleRepository } from './repository'
export { makeDemonstrationPeople, type Account } from './demonstration'
