import { Migration20260105000000_school } from './Migration20260105000000_school'
import { Migration20260105000100_guards } from './Migration20260105000100_guards'

/** Every migration in order. `npm run orm migration:create` makes a file; add it here (a test compares this list with the folder). */
export const migrations = [
  { name: 'Migration20260105000000_school', class: Migration20260105000000_school },
  { name: 'Migration20260105000100_guards', class: Migration20260105000100_guards },
]
