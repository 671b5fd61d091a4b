import { roles, type Role } from '~/utils/roles'

/** The studio that the address names, and what the signed-in person may do in it. */
export const useStudioStore = defineStore('studio', () => {
  const session = useSessionStore()
  const slug = ref('')
  const current = computed(() => session.studios.find(studio => studio.slug === slug.value || studio.id === slug.value) ?? null)

  function enter(slugOrId: string) {
    slug.value = slugOrId
    if (current.value) rememberStudio(current.value.slug)
  }

  const may = (least: Role) => current.value !== null && roles.indexOf(current.value.role) >= roles.indexOf(least)
  /** the path parameter of every row below a studio */
  const params = computed(() => ({ studio: slug.value }))
  /** the address of a screen in this studio */
  const to = (screen = '') => `/s/${slug.value}${screen && `/${screen}`}`

  return { slug, current, enter, may, params, to }
})
