/** One invented member of the demo. `githubId`, `login` and `email` are what the GitHub fake answers with. */
export type DemoPerson = {
  id: string
  githubId: number
  login: string
  name: string
  email: string
  isSteward: boolean
  /** What this person does in the demo, for the page where somebody is picked to sign in as. */
  part: string
}

const person = (n: number, login: string, name: string, part: string, isSteward = false): DemoPerson => ({
  id: `dem0persn0000${String(n).padStart(3, '0')}`,
  githubId: 900_100 + n,
  login,
  name,
  email: `${login}@demo.example`,
  isSteward,
  part
})

/** Everybody in the demo: nobody here exists. The first person of each part is the one to sign in as. */
export const demoPeople: readonly DemoPerson[] = [
  person(1, 'ilse-varnik', 'Ilse Varnik', 'maintainer of Buttress (its owner)'),
  person(2, 'tomo-reskala', 'Tomo Reskala', 'maintainer of Sundial (its owner), helps with Buttress'),
  person(3, 'odile-marrenth', 'Odile Marrenth', 'maintainer of Almanac (its owner)'),
  person(4, 'pell-hathrow', 'Pell Hathrow', 'builder: has boards made and assembled'),
  person(5, 'janne-sundquell', 'Janne Sundquell', 'builder: has boards made and assembled'),
  person(6, 'mirre-oskendal', 'Mirre Oskendal', 'builder: assembles small batches by hand'),
  person(7, 'bram-tolleway', 'Bram Tolleway', 'installer: repairs home consoles'),
  person(8, 'suvi-karnholm', 'Suvi Karnholm', 'installer: repairs handhelds'),
  person(9, 'edda-fennrick', 'Edda Fennrick', 'installer'),
  person(10, 'orrin-daskell', 'Orrin Daskell', 'installer'),
  person(11, 'liv-haldaren', 'Liv Haldaren', 'installer'),
  person(12, 'nico-pravendt', 'Nico Pravendt', 'installer'),
  person(13, 'tamsin-orlebeck', 'Tamsin Orlebeck', 'installer'),
  person(14, 'yorick-vesterlund', 'Yorick Vesterlund', 'installer'),
  person(15, 'kaisa-brunholt', 'Kaisa Brunholt', 'installer'),
  person(16, 'wren-aldermoor', 'Wren Aldermoor', 'steward of the site', true),
  person(17, 'remy-colstad', 'Remy Colstad', 'member who has not done anything yet')
]

/** The person with the given login. */
export function personByLogin(login: string): DemoPerson {
  const found = demoPeople.find((p) => p.login === login)
  if (!found) throw new Error(`No demo person is called ${login}`)
  return found
}
