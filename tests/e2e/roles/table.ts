import { randomUUID } from 'node:crypto'
import type { Fixture } from './fixture'

/** What an asker gets: HTTP status. */
export type Answers = Record<'builder' | 'crew' | 'follower' | 'stranger' | 'guest', number>

export interface Row {
  /** Makes the request; called afresh for each asker, so that what one deletes the next still finds. */
  request: (f: Fixture) => Promise<Call> | Call
  /** Status on a private build, then on a public one. */
  private: Answers
  public: Answers
}
export interface Call { path: string, body?: unknown, bytes?: Buffer }

const all = (status: number): Answers => ({ builder: status, crew: status, follower: status, stranger: status, guest: status })
const same = (request: Row['request'], answers: Answers): Row => ({ request, private: answers, public: answers })

/** Whoever may watch the build. */
const watch = (request: Row['request'], ok = 200): Row => ({ request, private: { ...all(ok), stranger: 404, guest: 404 }, public: all(ok) })
/** Crew and builder, of something whose existence is no secret to those who may watch. */
const work = (request: Row['request'], ok = 200): Row => ({
  request,
  private: { builder: ok, crew: ok, follower: 403, stranger: 404, guest: 404 },
  public: { builder: ok, crew: ok, follower: 403, stranger: 403, guest: 401 },
})
/** The builder alone, of such a thing. */
const run = (request: Row['request'], ok = 200): Row => ({
  request,
  private: { builder: ok, crew: 403, follower: 403, stranger: 404, guest: 404 },
  public: { builder: ok, crew: 403, follower: 403, stranger: 403, guest: 401 },
})
/** Crew and builder, of something that others must not even know of. */
const inner = (request: Row['request'], ok = 200): Row => same(request, { builder: ok, crew: ok, follower: 404, stranger: 404, guest: 404 })
const innerRun = (request: Row['request'], ok = 200): Row => same(request, { builder: ok, crew: 403, follower: 404, stranger: 404, guest: 404 })

const csv = 'number,stage,title,description,parts,materials,planned_hours\n1,Hull,Loft the sides,,,,\n'

/** Every route of the site and what each asker gets. A route that is missing here fails the test. */
export const TABLE: Record<string, Row> = {
  'ANY /api/[...missing]': same(() => ({ path: '/api/no/such/thing' }), all(404)),
  'GET /health': same(() => ({ path: '/health' }), all(200)),
  'GET /robots.txt': same(() => ({ path: '/robots.txt' }), all(200)),
  'GET /sitemap.xml': same(() => ({ path: '/sitemap.xml' }), all(200)),

  'GET /api/auth/me': same(() => ({ path: '/api/auth/me' }), all(200)),
  'POST /api/auth/sign-in': same(f => ({ path: '/api/auth/sign-in', body: { email: f.spare.email, password: f.password } }), all(200)),
  'POST /api/auth/sign-up': same(() => ({ path: '/api/auth/sign-up', body: { name: 'New hand', email: `${randomUUID()}@example.test`, password: 'long enough words' } }), all(201)),
  'POST /api/auth/sign-out': same(() => ({ path: '/api/auth/sign-out', body: {} }), all(200)),

  'GET /api/builds': same(() => ({ path: '/api/builds' }), { ...all(200), guest: 401 }),
  'POST /api/builds': same(() => ({ path: '/api/builds', body: { name: 'Another' } }), { ...all(201), guest: 401 }),
  'GET /api/builds/[build]': watch(f => ({ path: `/api/builds/${f.build.id}` })),
  'PATCH /api/builds/[build]': run(f => ({ path: `/api/builds/${f.build.id}`, body: { boat: 'Pram' } })),
  'DELETE /api/builds/[build]': run(async (f) => {
    const build = await f.anotherBuild()
    return { path: `/api/builds/${build.id}`, body: { name: build.name } }
  }),
  'GET /api/builds/[build]/bench': work(f => ({ path: `/api/builds/${f.build.id}/bench` })),
  'GET /api/builds/[build]/holdings': run(f => ({ path: `/api/builds/${f.build.id}/holdings` })),
  'GET /api/builds/[build]/plan': watch(f => ({ path: `/api/builds/${f.build.id}/plan` })),
  'GET /api/builds/[build]/plan/export': watch(f => ({ path: `/api/builds/${f.build.id}/plan/export?what=steps&format=csv` })),
  'POST /api/builds/[build]/plan/preview': run(f => ({ path: `/api/builds/${f.build.id}/plan/preview`, body: { text: csv } })),
  'POST /api/builds/[build]/plan/import': run(f => ({ path: `/api/builds/${f.build.id}/plan/import`, body: { text: csv } })),
  'POST /api/builds/[build]/steps': run(f => ({ path: `/api/builds/${f.build.id}/steps`, body: { title: 'Fit the thwart' } }), 201),
  'PUT /api/builds/[build]/steps/order': run(async f => ({ path: `/api/builds/${f.build.id}/steps/order`, body: { ids: await f.stepIds() } })),
  'GET /api/builds/[build]/parts': watch(f => ({ path: `/api/builds/${f.build.id}/parts` })),
  'POST /api/builds/[build]/parts': run(f => ({ path: `/api/builds/${f.build.id}/parts`, body: { name: `part ${randomUUID()}` } }), 201),
  'PUT /api/builds/[build]/parts/order': run(async f => ({ path: `/api/builds/${f.build.id}/parts/order`, body: { ids: await f.partIds() } })),
  'PATCH /api/steps/[step]': run(async f => ({ path: `/api/steps/${(await f.anotherStep()).id}`, body: { title: 'Fit the knee' } })),
  'DELETE /api/steps/[step]': run(async f => ({ path: `/api/steps/${(await f.anotherStep()).id}` })),
  'PATCH /api/parts/[part]': run(async f => ({ path: `/api/parts/${(await f.anotherPart()).id}`, body: { material: 'larch' } })),
  'DELETE /api/parts/[part]': run(async f => ({ path: `/api/parts/${(await f.anotherPart()).id}` })),

  'GET /api/builds/[build]/facts': work(f => ({ path: `/api/builds/${f.build.id}/facts` })),
  'GET /api/builds/[build]/sessions': work(f => ({ path: `/api/builds/${f.build.id}/sessions` })),
  'POST /api/builds/[build]/sessions': work(f => ({ path: `/api/builds/${f.build.id}/sessions`, body: { date: '2026-10-03' } }), 201),
  'GET /api/sessions/[session]': inner(f => ({ path: `/api/sessions/${f.session.id}` })),
  'PATCH /api/sessions/[session]': inner(f => ({ path: `/api/sessions/${f.session.id}`, body: { place: 'Shed' } })),
  'DELETE /api/sessions/[session]': innerRun(async f => ({ path: `/api/sessions/${(await f.anotherSession()).id}` })),
  'GET /api/sessions/[session]/holdings': innerRun(f => ({ path: `/api/sessions/${f.session.id}/holdings` })),
  'GET /api/sessions/[session]/cues': inner(f => ({ path: `/api/sessions/${f.session.id}/cues` })),
  'GET /api/sessions/[session]/chapters': inner(f => ({ path: `/api/sessions/${f.session.id}/chapters` })),
  'POST /api/sessions/[session]/chapters': same(f => ({
    path: `/api/sessions/${f.session.id}/chapters`,
    body: { put: [{ id: randomUUID(), clipId: f.clip.id, ...f.freeSpan(), stepId: null, operation: 'cut', partIds: [], inking: 'inked', version: null }] },
  }), { builder: 200, crew: 200, follower: 404, stranger: 404, guest: 401 }),
  'GET /api/sessions/[session]/facts': inner(f => ({ path: `/api/sessions/${f.session.id}/facts` })),
  'GET /api/sessions/[session]/pickups': inner(f => ({ path: `/api/sessions/${f.session.id}/pickups` })),
  'POST /api/sessions/[session]/pencil': inner(f => ({ path: `/api/sessions/${f.session.id}/pencil`, body: {} })),
  'PATCH /api/facts/[fact]': inner(async (f) => {
    const fact = await f.freshFact()
    return { path: `/api/facts/${fact.id}`, body: { stepId: f.step.id, version: fact.version } }
  }),
  'PATCH /api/pickups/[pickup]': inner(async (f) => {
    const pickup = await f.freshPickup()
    return { path: `/api/pickups/${pickup.id}`, body: { state: 'done', version: pickup.version } }
  }),
  'GET /api/sessions/[session]/events': inner(f => ({ path: `/api/sessions/${f.session.id}/events` })),
  'POST /api/sessions/[session]/captions': inner(f => ({ path: `/api/sessions/${f.session.id}/captions?name=clip.vtt`, bytes: Buffer.from('WEBVTT\n\n00:01.000 --> 00:02.000\nhello\n') }), 201),
  'POST /api/sessions/[session]/clips': inner(f => ({
    path: `/api/sessions/${f.session.id}/clips`,
    body: { name: 'clip.mp4', sizeBytes: 1000, contentType: 'video/mp4', fingerprint: (randomUUID() + randomUUID()).replaceAll('-', '') },
  })),
  'PATCH /api/clips/[clip]': inner(f => ({ path: `/api/clips/${f.clip.id}`, body: { camera: 'left' } })),
  'DELETE /api/clips/[clip]': innerRun(async f => ({ path: `/api/clips/${(await f.anotherClip()).id}` })),
  'GET /api/clips/[clip]/holdings': innerRun(f => ({ path: `/api/clips/${f.clip.id}/holdings` })),
  'POST /api/clips/[clip]/retry': inner(f => ({ path: `/api/clips/${f.clip.id}/retry`, body: {} })),
  'POST /api/clips/[clip]/upload/parts': inner(async f => ({ path: `/api/clips/${(await f.uploadingClip()).id}/upload/parts`, body: { partNumbers: [1] } })),
  // Nothing was sent, so the one who may ask is told which parts are missing.
  'POST /api/clips/[clip]/upload/complete': inner(async f => ({ path: `/api/clips/${(await f.uploadingClip()).id}/upload/complete`, body: { parts: [{ partNumber: 1, etag: '"x"', sha256: 'a'.repeat(64) }] } }), 409),
  'PATCH /api/captions/[track]': inner(f => ({ path: `/api/captions/${f.track}`, body: { language: 'en' } })),
  'DELETE /api/captions/[track]': innerRun(async f => ({ path: `/api/captions/${await f.anotherTrack()}` })),
  'GET /api/captions/[track]/export': inner(f => ({ path: `/api/captions/${f.track}/export?format=vtt` })),
  'GET /api/captions/[track]/original': inner(f => ({ path: `/api/captions/${f.track}/original` }), 302),
  'PATCH /api/cues/[cue]': inner(async (f) => {
    const cue = await f.freshCue()
    return { path: `/api/cues/${cue.id}`, body: { text: 'the knee', version: cue.version } }
  }),

  'GET /api/search': same(() => ({ path: '/api/search?q=knee' }), all(200)),
  'GET /api/watch': same(() => ({ path: '/api/watch' }), all(200)),
  'GET /api/watch/[address]': watch(f => ({ path: `/api/watch/${f.build.address}` })),
  'GET /api/watch/[address]/steps/[number]': watch(f => ({ path: `/api/watch/${f.build.address}/steps/${f.step.number}` })),
  'GET /api/watch/[address]/moments/[clip]': watch(f => ({ path: `/api/watch/${f.build.address}/moments/${f.clip.id}` })),

  'GET /media/clips/[clip]/video': watch(f => ({ path: `/media/clips/${f.clip.id}/video` }), 302),
  'GET /media/clips/[clip]/poster': watch(f => ({ path: `/media/clips/${f.clip.id}/poster` }), 302),
  'GET /media/clips/[clip]/peaks': watch(f => ({ path: `/media/clips/${f.clip.id}/peaks` }), 302),
  'GET /media/clips/[clip]/sheets/[n]': watch(f => ({ path: `/media/clips/${f.clip.id}/sheets/0` }), 302),
  'GET /media/clips/[clip]/captions/[track]': watch(f => ({ path: `/media/clips/${f.clip.id}/captions/${f.track}.vtt` })),
}
