import { fileTypeFromBuffer } from 'file-type'
import { PICTURE_SIZE, PICTURE_TYPES } from '#shared/pictures'
import type { Actor } from '#shared/policies/actor'
import { workInProject } from '#shared/policies/projects'
import { Attachment } from '../../database'
import { putFile } from '../../storage'
import { badInput, refusal } from '../../utils/errors'
import { newId } from '../../utils/ids'
import { onProject } from '../projects/onProject'

export interface UploadedPicture { name: string, bytes: Uint8Array }

async function pictureType(bytes: Uint8Array): Promise<string> {
  const found = await fileTypeFromBuffer(bytes)
  const known = PICTURE_TYPES.find(type => type === found?.mime)
  if (!known) throw badInput('file', 'This is not a picture that a sheet can hold. Give a PNG, JPEG, WebP or GIF file.', 'not_a_picture')
  return known
}

/** The name as it is shown: without folders and control characters. */
const plainName = (name: string): string => name.split(/[\\/]/).at(-1)!.replace(/\p{Cc}+/gu, ' ').trim().slice(0, 200) || 'picture'

/** Keeps a picture for the sheets of a project. The same picture again is the same attachment. Returns its id. */
export async function addAttachment(actor: Actor, projectId: string, picture: UploadedPicture): Promise<string> {
  if (picture.bytes.byteLength > PICTURE_SIZE) throw refusal(413, { code: 'too_large', field: 'file', help: `A picture has at most ${PICTURE_SIZE / 1024 / 1024} MB.` })
  const mime = await pictureType(picture.bytes)
  const stored = await putFile(picture.bytes)
  return onProject(actor, projectId, workInProject, async ({ transaction }) => {
    const present = await Attachment.findOne({ where: { projectId, sha256: stored.sha256 }, transaction })
    if (present) return present.id
    const attachment = await Attachment.create({
      id: newId(), projectId, name: plainName(picture.name), mime, size: stored.size, sha256: stored.sha256, storageKey: stored.key, uploadedBy: actor.id,
    }, { transaction })
    return attachment.id
  })
}
