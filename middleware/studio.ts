/** Behind sign-in: knows who is there and which studio the address names, or sends to the first page and back afterwards. */
export default defineNuxtRouteMiddleware(async (to) => {
  const session = useSessionStore()
  const studio = useStudioStore()
  try {
    await session.ensure()
  }
  catch (error) {
    if (error instanceof ApiError && error.code === 'not_signed_in') return navigateTo({ path: '/', query: { next: to.fullPath } })
    throw createError({ statusCode: 503, statusMessage: 'Unavailable', message: sentenceOf(error), fatal: true })
  }
  studio.enter(String(to.params.studio))
  if (!studio.current) throw createError({ statusCode: 404, statusMessage: 'Not found', message: 'There is no studio of yours under this address.', fatal: true })
})
