import { verificationParams } from '#shared/schemas/verification'
import type { VerificationView } from '#shared/types/api'
import { issueByCode } from '../../database/issues'
import { presentVerification } from '../../presenters/verification'
import { withinVerificationLimits } from '../../utils/rates'
import { paramsOf } from '../../utils/validation'

/** Public: whether a code on a sheet is genuine, and which hash belongs to it. */
export default defineEventHandler(async (event): Promise<VerificationView> => {
  await withinVerificationLimits(event)
  const { code } = paramsOf(event, verificationParams)
  setHeader(event, 'cache-control', 'no-store')
  return presentVerification(code, await issueByCode(code))
})
