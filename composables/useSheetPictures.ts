/** Pictures that go into a sheet: kept by the project, named in the sheet by their id. */
import { refusalOf } from './useRevision'
import { useNotices } from '~/stores/notices'

/** Largest picture that is sent; the server has the same bound. */
const LARGEST = 10 * 1024 * 1024

export function useSheetPictures(projectId: string) {
  const notices = useNotices()

  /** Id of the stored picture; null where it was refused, which is then said. */
  async function upload(file: File): Promise<string | null> {
    if (file.size > LARGEST) {
      notices.say(`${file.name} is larger than 10 MB. Make it smaller and insert it again.`, 'problem')
      return null
    }
    const body = new FormData()
    body.append('file', file, file.name)
    notices.say(`Sending ${file.name} …`, 'info')
    try {
      const { id } = await $fetch<{ id: string }>(`/api/projects/${projectId}/attachments`, { method: 'POST', body })
      return id
    }
    catch (error) {
      notices.say(`${file.name} was not taken. ${refusalOf(error).text}`, 'problem')
      return null
    }
  }
  return { upload }
}
