/** All plain forms of the product. */
import { account } from './account.ts'
import { people } from './people.ts'

export const server = { account, people }
