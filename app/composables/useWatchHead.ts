import type { WatchChapter, WatchClip, WatchHead } from '#shared/types/watch'
import { videoData } from '#shared/utils/videoData'

/** Title, description, canonical address, link preview and, where there is footage, structured data of a public page. */
export function useWatchHead(page: () => (WatchHead & { cover: string | null, clips?: WatchClip[], chapters?: WatchChapter[] }) | null | undefined, words: () => { title: string, description: string }) {
  const title = () => `${words().title} · Ribband`
  useSeoMeta({
    title, description: () => words().description, ogTitle: title, ogDescription: () => words().description, ogType: 'video.other',
    ogUrl: () => page()?.canonical, ogImage: () => page()?.cover ?? undefined, twitterCard: () => page()?.cover ? 'summary_large_image' : 'summary',
    robots: () => page()?.listed ? undefined : 'noindex',
  })
  useHead({
    link: () => page() ? [{ rel: 'canonical', href: page()!.canonical }] : [],
    script: () => {
      const shown = page()
      if (!shown?.clips?.length) return []
      const data = videoData({ site: new URL(shown.canonical).origin, address: shown.build.address, clips: shown.clips, chapters: shown.chapters ?? [], ...words() })
      // `<` is the one sign that could end the element.
      return data.length ? [{ type: 'application/ld+json', innerHTML: JSON.stringify(data).replaceAll('<', '\\u003c') }] : []
    },
  })
}
