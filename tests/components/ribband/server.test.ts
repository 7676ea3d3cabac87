// @vitest-environment node
import { expect, it } from 'vitest'
import { createSSRApp } from 'vue'
import { renderToString } from 'vue/server-renderer'
import RibbandStrip from '../../../app/components/ribband/RibbandStrip.vue'
import { chapters, clips, cues, steps } from './session'

it('is sent by the server with its height, so that nothing moves when it is drawn', async () => {
  expect(typeof window).toBe('undefined')
  const html = await renderToString(createSSRApp(RibbandStrip, { clips, chapters, steps, cues, atMs: 22_000, selectedChapterId: 'b' }))
  expect(html).toMatch(/--wide:\s?\d+px/)
  expect(html).toMatch(/--narrow:\s?\d+px/)
  expect(html).toContain('Glue · Glue the transom')
})
