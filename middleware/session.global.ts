import { mayVisit } from '~/composables/useAbility'

const PUBLIC = /^\/(sign-in|invitation|reset|verify|print|outbox)(\/|$)/

/** Guides people to where their work is. It guards nothing: every route of the server decides for itself. */
export default defineNuxtRouteMiddleware(async (to) => {
  const { session, known, refresh } = useSession()
  if (!known.value) await refresh()

  if (PUBLIC.test(to.path)) {
    return to.path === '/sign-in' && session.value ? navigateTo(session.value.home) : undefined
  }
  if (!session.value) {
    return navigateTo({ path: '/sign-in', query: to.path === '/' ? {} : { then: to.fullPath } })
  }
  if (to.path === '/') return navigateTo(session.value.home, { replace: true })
  if (!mayVisit(to.path, session.value.user.roles)) {
    return abortNavigation(createError({ statusCode: 404, statusMessage: 'Not found' }))
  }
})
