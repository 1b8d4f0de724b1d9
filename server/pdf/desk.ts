import type { PrintView } from '../../shared/types/print'
import { tokenDesk } from './tokens'

/** Where the PDF job leaves an issue for the print page, in this process. */
export const printTokens = tokenDesk<PrintView>()
