import { index, route, type RouteConfig } from '@react-router/dev/routes'

/** The whole site on one page. */
export default [
  index('routes/home/page.tsx'),

  route('guides', 'routes/guides/index/page.tsx'),
  route('guides/:page', 'routes/guides/guide/page.tsx'),

  route('health', 'routes/health/endpoint.ts'),
  route('*', 'routes/not-found/page.tsx')
] satisfies RouteConfig
