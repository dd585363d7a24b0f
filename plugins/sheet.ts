/** Puts the person's sheet on the page, on the server already: no other colour is seen first. */
export default defineNuxtPlugin({
  name: 'lapwright-sheet',
  dependsOn: ['lapwright-session'],
  setup() {
    const session = useSessionStore()
    useHead({
      htmlAttrs: { 'data-sheet': () => session.preferences.sheet },
      // For the moment before the style sheet is there.
      meta: [{ name: 'color-scheme', content: () => SCHEMES[session.preferences.sheet] }],
    })
  },
})

const SCHEMES = { paper: 'light', dark: 'dark', device: 'light dark' }
