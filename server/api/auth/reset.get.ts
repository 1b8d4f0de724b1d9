import { linkTokenParams } from '#shared/schemas/auth'
import { readLink } from '../../commands/people/passwords'

/** Public: whoever holds the link sees whom it is for. */
export default defineEventHandler(async event => readLink('reset', queryOf(event, linkTokenParams).token))
