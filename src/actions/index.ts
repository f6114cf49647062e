/** All plain forms of the product. */
import { account } from './account.ts'
import { clock } from './clock.ts'
import { digest } from './digest.ts'
import { flag } from './flag.ts'
import { people } from './people.ts'
import { plan } from './plan.ts'
import { post } from './post.ts'
import { property } from './property.ts'
import { roster } from './roster.ts'
import { tariff } from './tariff.ts'
import { tenancy } from './tenancy.ts'
import { tenant } from './tenant.ts'

export const server = { account, clock, digest, flag, people, plan, post, property, roster, tariff, tenancy, tenant }
