/** Pictures among what was pasted or dropped. */
export function imageFiles(transfer: DataTransfer | null): File[] {
  return [...transfer?.files ?? []].filter(file => file.type.startsWith('image/'))
}
