/**
 * The letters that Polewright sends, as data and as text.
 * A letter travels as the payload of an `email` job; links in it are paths, the site's address is put before them when it is sent.
 */
import { z } from 'zod'

const person = z.object({ name: z.string(), address: z.email() })
const path = z.string().startsWith('/')
/** `job` is the job number; `number` and `revision` name the sheet as on its title block. */
const sheet = z.object({ job: z.string(), number: z.string(), title: z.string(), revision: z.string() })
const base = { to: person }
const onSheet = { ...base, sheet, by: z.string(), link: path }

export const letterSchema = z.discriminatedUnion('kind', [
  z.object({ kind: z.literal('invitation'), ...base, by: z.string(), link: path, expires: z.iso.datetime() }),
  z.object({ kind: z.literal('password_reset'), ...base, link: path, expires: z.iso.datetime() }),
  z.object({ kind: z.literal('checker_asked'), ...onSheet, due: z.string().nullable() }),
  z.object({ kind: z.literal('returned'), ...onSheet, reason: z.string() }),
  z.object({ kind: z.literal('recalled'), ...onSheet, reason: z.string().nullable() }),
  z.object({ kind: z.literal('issue_failed'), ...onSheet, reason: z.string() }),
  z.object({ kind: z.literal('issued'), ...onSheet, purpose: z.string(), code: z.string(), supersedes: z.string().nullable() }),
  z.object({ kind: z.literal('withdrawn'), ...onSheet, reason: z.string() }),
])
export type Letter = z.infer<typeof letterSchema>
type SheetLetter = Extract<Letter, { sheet: unknown }>

export interface LetterText { subject: string, text: string }

const FOOT = 'This message was sent by Polewright, where the firm keeps its calculation sheets. Answers to this address are not read.'

/** `2026-12-01T09:30:00Z` → `1 December 2026, 09:30 UTC`; a plain date gives the date alone. */
export function dateWords(iso: string): string {
  const date = new Date(iso)
  const day = new Intl.DateTimeFormat('en-GB', { dateStyle: 'long', timeZone: 'UTC' }).format(date)
  return iso.includes('T') ? `${day}, ${iso.slice(11, 16)} UTC` : day
}

const nameOf = ({ sheet: s }: SheetLetter) => `${s.number} revision ${s.revision}`
const fullName = ({ sheet: s }: SheetLetter) => `${s.number} revision ${s.revision}, “${s.title}” (job ${s.job})`

type Body = { subject: string, lines: (string | null)[] }
type Writers = { [K in Letter['kind']]: (letter: Extract<Letter, { kind: K }>, site: string) => Body }

const people: Pick<Writers, 'invitation' | 'password_reset'> = {
  invitation: (letter, site) => ({
    subject: 'Your account with Polewright',
    lines: [
      `${letter.by} has set up an account for you in Polewright.`,
      `Choose your password here:\n${site}${letter.link}`,
      `The link works once, until ${dateWords(letter.expires)}. If you did not expect it, do nothing: no account opens without it.`,
    ],
  }),
  password_reset: (letter, site) => ({
    subject: 'Choose a new password',
    lines: [
      'Someone, most likely you, asked for a new password for your account.',
      `Choose it here:\n${site}${letter.link}`,
      `The link works once, until ${dateWords(letter.expires)}. If it was not you, do nothing: your password stays as it is.`,
    ],
  }),
}

const checking: Pick<Writers, 'checker_asked' | 'returned' | 'recalled' | 'issue_failed'> = {
  checker_asked: (letter, site) => ({
    subject: `For checking: ${nameOf(letter)}`,
    lines: [
      `${letter.by} asks you to check ${fullName(letter)}.`,
      letter.due ? `It is due on ${dateWords(letter.due)}.` : null,
      `Open it:\n${site}${letter.link}`,
    ],
  }),
  returned: (letter, site) => ({
    subject: `Returned: ${nameOf(letter)}`,
    lines: [
      `${letter.by} has returned ${fullName(letter)}. It is a draft again; signatures given on it are void.`,
      `Reason: ${letter.reason}`,
      `Open it:\n${site}${letter.link}`,
    ],
  }),
  recalled: (letter, site) => ({
    subject: `Recalled: ${nameOf(letter)}`,
    lines: [
      `${letter.by} has recalled ${fullName(letter)}. There is nothing to check for now.`,
      letter.reason ? `Reason: ${letter.reason}` : null,
      `See it:\n${site}${letter.link}`,
    ],
  }),
  issue_failed: (letter, site) => ({
    subject: `Not issued: ${nameOf(letter)}`,
    lines: [
      `The stamped PDF of ${fullName(letter)} could not be made, so it was not issued. It is checked again and the approval is void.`,
      `What went wrong: ${letter.reason}`,
      `Approve it again here:\n${site}${letter.link}`,
    ],
  }),
}

const issuing: Pick<Writers, 'issued' | 'withdrawn'> = {
  issued: (letter, site) => ({
    subject: `Issued ${letter.purpose}: ${nameOf(letter)}`,
    lines: [
      `${fullName(letter)} has been issued to you ${letter.purpose}.`,
      letter.supersedes ? `It supersedes revision ${letter.supersedes}: please do not use that one any more.` : null,
      `Read and download it:\n${site}${letter.link}`,
      `Whoever holds the file can verify it without an account:\n${site}/verify/${letter.code}\nVerification code: ${letter.code}`,
    ],
  }),
  withdrawn: (letter, site) => ({
    subject: `Withdrawn: ${nameOf(letter)}`,
    lines: [
      `${letter.by} has withdrawn ${fullName(letter)}. Please do not use it any more. No earlier revision takes its place.`,
      `Reason: ${letter.reason}`,
      `See it:\n${site}${letter.link}`,
    ],
  }),
}

const writers: Writers = { ...people, ...checking, ...issuing }

/** The subject and the plain text of a letter; `site` is the site's address without a slash at its end. */
export function letterText(letter: Letter, site: string): LetterText {
  const write = writers[letter.kind] as (letter: Letter, site: string) => Body
  const { subject, lines } = write(letter, site)
  const paragraphs = [`${letter.to.name},`, ...lines.filter(line => line !== null), `-- \n${FOOT}`]
  return { subject, text: `${paragraphs.join('\n\n')}\n` }
}
