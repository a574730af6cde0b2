import type { ProblemCode } from '#shared/problems'

/** For each problem, what it means and what to do about it. */
export const REMEDIES: Readonly<Record<ProblemCode, string>> = {
  'value-not-read':
    'Type values as they stand on drawings: 4k7, 4.7 kΩ, 4700, 100n, 0.1 µF. The answer quotes what could not be read.',
  'value-not-positive': 'Resistances, capacitances and frequencies are above zero. Give another value.',
  'value-out-of-range': 'No part of this size can be bought or built. Check the prefix: m is milli, M is mega.',
  'unit-wrong':
    'The value carries a unit of another kind, such as kΩ where a capacitance is meant. Change one of them.',
  'part-unknown': 'The block has no part of this name. The block’s page lists its parts as they are drawn.',
  'part-missing': 'Give the part a value, or targets from which it can be solved.',
  'result-unknown': 'The block has no result of this name. The block’s page lists its results, such as f_c and K.',
  'target-not-settable': 'This result follows from the others and cannot be asked for. Set a target for one of those.',
  'target-wrong-sign': 'An inverting stage has a negative gain. Give the sign of the block, or the gain in dB.',
  'condition-unknown':
    'Conditions are source and load resistance, load capacitance, supply, temperature and largest signal. See the help on computing for their names.',
  'output-unknown': 'The block has no output of this name; leave it out to get the first one.',
  'series-unknown': 'Preferred series are E3, E6, E12, E24, E48, E96 and E192 (IEC 60063).',
  'circuit-not-read': 'Line and column say where the circuit text stops making sense. The help gives its grammar.',
  'circuit-singular':
    'Some node is left floating, or two sources fight. See that every node has a path to the reference and every amplifier its feedback.',
  'circuit-too-large':
    'In part names the answer would be too long to read. Ask for the response in numbers, which knows no such limit.',
  'calculator-not-read': 'Line and column say where the calculator text stops making sense. The help gives its form.',
  'formula-not-read': 'The formula uses a name or a function that is not known here. The help lists them.',
  'formula-dimension': 'The formula adds or compares quantities of different kinds, such as ohms and farads.',
  'page-not-read': 'Line and column say where the page source stops making sense. The help gives its form.',
  'request-not-valid':
    'The answer lists each field that is wrong, with its place in the request. The help has examples.',
  'not-found': 'The address names nothing that is here, or nothing that you may see. Search for it on the shelf.',
  'not-signed-in': 'Sign in; you come back to the page you asked for. A script signs in first and keeps the cookie.',
  'role-too-low':
    'Somebody with a higher role can do this: editors write blocks, leads approve them and manage people.',
  'sign-in-failed': 'Check e-mail and password, capitals too. Ask a lead if neither helps.',
  'too-many-attempts': 'Wait as long as the answer says, then try again.',
  'cross-site': 'Open the page at its own address. A script sends JSON and no Origin header of another site.',
  'encoding-refused': 'Send the body as it is, without Content-Encoding.',
  'media-type-refused': 'Send the body as JSON, with Content-Type: application/json.',
  'method-not-allowed': 'The address is right, the method is not. The answer’s Allow header lists those that are.',
  'body-too-large': 'Send less at once, such as fewer frequencies.',
  'address-too-long': 'The address carries more than is read. Open the block and set the values there.',
  'precondition-missing': 'Read the record first, then send its ETag back as If-Match with the change.',
  'precondition-failed': 'Somebody changed the record since you read it. Read it again and repeat your change.',
  'key-reused': 'An Idempotency-Key stands for one request. Take a new key for another one.',
  'limit-without-reason':
    'The values lie outside a limit of the block. Give the reason and save again; the sheet prints it.',
  'database-away': 'Wait a moment: the server goes on by itself when its database is back. What is saved stays saved.',
  overloaded: 'Wait a moment and try again; the answer says how long.',
  'not-foreseen': 'Tell whoever runs this server the request number; it finds the matter in the log.',
}
