/** To whom an issued revision was sent. */
export interface RecipientView { name: string, email: string, organisation: string | null, at: string }
