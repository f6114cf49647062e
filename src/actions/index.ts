/** All plain forms of the product. */
import { account } from './account.ts'
import { people } from './people.ts'
import { property } from './property.ts'

export const server = { account, people, property }
