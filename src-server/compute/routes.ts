import { ComputeAnswer, ComputeRequest } from '#shared/contracts/compute'
import { CodeParams, RevisionParams } from '../blocks'
import { route } from '../http'
import type { ComputeService } from './service'

export const computeRoutes = (compute: ComputeService) => [
  route(
    'POST /api/blocks/:code/compute',
    { role: 'reader', params: CodeParams, body: ComputeRequest, answer: { 200: ComputeAnswer } },
    ({ params, body }) => compute.compute(params.code, undefined, body),
  ),
  route(
    'POST /api/blocks/:code/revisions/:number/compute',
    { role: 'reader', params: RevisionParams, body: ComputeRequest, answer: { 200: ComputeAnswer } },
    ({ params, body }) => compute.compute(params.code, params.number, body),
  ),
]
