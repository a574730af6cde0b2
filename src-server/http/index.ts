export { buildApp, routesOf, type AppNeeds } from './build-app'
export { cspReportLog, cspReportRoutes, type CspReportLog } from './csp-reports'
export { idempotency } from './idempotency'
export { reply, Reply, route, type Route, type RouteRole } from './route'
