import { index, route, type RouteConfig } from '@react-router/dev/routes'

/** The whole site on one page. */
export default [
  index('routes/home/page.tsx'),

  route('boards', 'routes/boards/list/page.tsx'),
  route('boards/new', 'routes/boards/new/page.tsx'),
  route('boards/:board', 'routes/boards/board/page.tsx'),
  route('boards/:board/edit', 'routes/boards/edit/page.tsx'),
  route('boards/:board/fit', 'routes/boards/fit/page.tsx'),
  route('boards/:board/releases/new', 'routes/releases/new/page.tsx'),
  route('boards/:board/releases/:version', 'routes/releases/release/page.tsx'),
  route('boards/:board/releases/:version/edit', 'routes/releases/edit/page.tsx'),
  route('boards/:board/releases/:version/withdraw', 'routes/releases/withdraw/page.tsx'),
  route('boards/:board/releases/:version/bundle', 'routes/releases/bundle/endpoint.ts'),
  route('boards/:board/releases/:version/check', 'routes/releases/check/endpoint.ts'),
  route('boards/:board/releases/:version/picture/:file', 'routes/releases/picture/endpoint.ts'),
  route('bench', 'routes/bench/page.tsx'),

  route('consoles', 'routes/consoles/list/page.tsx'),
  route('consoles/:console', 'routes/consoles/console/page.tsx'),
  route('consoles/:console/:revision', 'routes/consoles/revision/page.tsx'),
  route('fit', 'routes/fit/page.tsx'),
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
  route('calculators/survival', 'routes/calculators/survival/page.tsx'),
  route('boards/:board/reliability', 'routes/reliability/page.tsx'),
  route('boards/:board/reliability.csv', 'routes/reliability/csv/endpoint.ts'),

  route('api/v1/boards', 'routes/api/boards/endpoint.ts'),
  route('api/v1/boards/:board', 'routes/api/board/endpoint.ts'),
  route('api/v1/boards/:board/releases', 'routes/api/releases/endpoint.ts'),
  route('api/v1/boards/:board/releases/:version', 'routes/api/release/endpoint.ts'),
  route('api/v1/boards/:board/reliability', 'routes/api/reliability/endpoint.ts'),
  route('api/v1/consoles', 'routes/api/consoles/endpoint.ts'),
  route('api/v1/consoles/:console', 'routes/api/console/endpoint.ts'),
  route('api/v1/compute/survival', 'routes/api/compute-survival/endpoint.ts'),
  route('api/v1/compute/bundle-check', 'routes/api/compute-bundle-check/endpoint.ts'),

  route('health', 'routes/health/endpoint.ts'),
  route('*', 'routes/not-found/page.tsx')
] satisfies RouteConfig
