/** All migrations in order; append only. */
import type { Migration } from 'kysely'
import * as accounts from './0001-accounts.ts'
import * as buildings from './0002-buildings.ts'
import * as work from './0003-work.ts'
import * as postAndJobs from './0004-post-and-jobs.ts'
import * as accountEvents from './0005-account-events.ts'
import * as mailComplete from './0009-mail-complete.ts'
import * as currentFigures from './0010-current-figures.ts'
import * as tenantFeeds from './0011-tenant-feeds.ts'
import * as tariffEditions from './0012-tariff-editions.ts'
import * as plans from './0013-plans.ts'

export const MIGRATIONS: Readonly<Record<string, Migration>> = {
  '0001-accounts': accounts,
  '0002-buildings': buildings,
  '0003-work': work,
  '0004-post-and-jobs': postAndJobs,
  '0005-account-events': accountEvents,
  '0009-mail-complete': mailComplete,
  '0010-current-figures': currentFigures,
  '0011-tenant-feeds': tenantFeeds,
  '0012-tariff-editions': tariffEditions,
  '0013-plans': plans,
}
