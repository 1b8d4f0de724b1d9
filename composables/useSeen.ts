const KEPT = 400

/** Which issued sheets were opened on this device, so that the list can say what is new. */
export function useSeen() {
  const seen = useLocalStorage<string[]>('polewright-seen', [], { initOnMounted: true })
  const mounted = useMounted()

  const isNew = (revisionId: string) => mounted.value && !seen.value.includes(revisionId)
  function markSeen(revisionId: string) {
    if (!seen.value.includes(revisionId)) seen.value = [...seen.value, revisionId].slice(-KEPT)
  }
  return { isNew, markSeen }
}
