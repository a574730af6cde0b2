export { computeRoutes } from './routes'
export { computeService, type ComputeService } from './service'
