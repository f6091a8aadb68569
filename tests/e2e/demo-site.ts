import { demoPeople } from '~db/seed/people'
import { seedDemo } from '~db/seed/seed'
import { startSite, type Site } from '../http/harness'

/** The built server with the whole demo world, its people known to GitHub's stand-in. */
export const startDemoSite = (): Promise<Site> =>
  startSite({
    people: demoPeople.map(({ githubId, login, name, email, part }) => ({
      id: githubId,
      login,
      name,
      part,
      emails: [{ email, primary: true, verified: true }]
    })),
    prepare: (world) => seedDemo(world)
  })
