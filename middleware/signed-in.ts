/** A page of one's own, outside any studio: sends strangers to the first page and back afterwards. */
export default defineNuxtRouteMiddleware(async (to) => {
  try {
    await useSessionStore().ensure()
  }
  catch (error) {
    if (error instanceof ApiError && error.code === 'not_signed_in') return navigateTo({ path: '/', query: { next: to.fullPath } })
    throw createError({ statusCode: 503, statusMessage: 'Unavailable', message: sentenceOf(error), fatal: true })
  }
})
