export { sizingRepository } from './repository'
export { sizingRoutes } from './routes'
export { sizingService, type SizingService } from './service'
