import { Migration20260105000000_school } from './Migration20260105000000_school'
import { Migration20260105000100_guards } from './Migration20260105000100_guards'
import { Migration20261201000000_around_the_bench } from './Migration20261201000000_around_the_bench'
import { Migration20261201000100_place_and_money_guards } from './Migration20261201000100_place_and_money_guards'

/** Every migration in order. `npm run orm migration:create` makes a file; add it here (a test compares this list with the folder). */
export const migrations = [
  { name: 'Migration20260105000000_school', class: Migration20260105000000_school },
  { name: 'Migration20260105000100_guards', class: Migration20260105000100_guards },
  { name: 'Migration20261201000000_around_the_bench', class: Migration20261201000000_around_the_bench },
  { name: 'Migration20261201000100_place_and_money_guards', class: Migration20261201000100_place_and_money_guards },
]
