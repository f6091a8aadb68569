import { index, route, type RouteConfig } from '@react-router/dev/routes'

/** The whole site on one page. */
export default [
  index('routes/home/page.tsx'),

  route('guides', 'routes/guides/index/page.tsx'),
  route('guides/:page', 'routes/guides/guide/page.tsx'),
  route('sign-in', 'routes/sign-in/page.tsx'),
  route('sign-in/github', 'routes/sign-in/github/endpoint.ts'),
  route('sign-in/github/callback', 'routes/sign-in/callback/page.tsx'),
  route('sign-in/link/:token', 'routes/sign-in/link/page.tsx'),
  route('sign-out', 'routes/sign-out/endpoint.ts'),
  route('account', 'routes/account/page.tsx'),
  route('report', 'routes/reports/file/page.tsx'),
  route('reports', 'routes/reports/mine/page.tsx'),
  route('reports/:id', 'routes/reports/one/page.tsx'),
  route('boards/:board/reliability', 'routes/reliability/page.tsx'),
  route('boards/:board/reliability.csv', 'routes/reliability/csv/endpoint.ts'),
  route('api/v1/boards/:board/reliability', 'routes/api/reliability/endpoint.ts'),

  route('health', 'routes/health/endpoint.ts'),
  route('*', 'routes/not-found/page.tsx')
] satisfies RouteConfig
