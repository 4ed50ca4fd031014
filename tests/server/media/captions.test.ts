import { readFileSync } from 'node:fs'
import { randomUUID } from 'node:crypto'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { MediaTrack } from '#server/db/entities/MediaTrack'
import { readTrack } from '#server/services/media/read-track'
import type { MediaView } from '#shared/contract/media'
import { openHarness, type Harness } from '../harness'
import { serveApi, type Api, type Caller } from '../http'
import { makeSchool, type TestSchool } from '../review/school'
import { sendFile } from '../uploads/send-file'

const captions = (vtt: string, duration: number | null = null) => readTrack({ kind: 'captions', vtt }, duration)

describe('reading captions', () => {
  it('gives times in milliseconds and the words alone', () => {
    expect(captions('WEBVTT\n\nNOTE by hand\n\nfirst\n00:01.250 --> 00:02.500 align:start\n<v Hanne>Look at the <b>lip</b>\nat twelve &amp; three\n\n01:00:00.000 --> 01:00:01.000\nEnd\n')).toEqual({
      cues: [{ fromMs: 1250, toMs: 2500, text: 'Look at the lip at twelve & three' }, { fromMs: 3_600_000, toMs: 3_601_000, text: 'End' }],
      issues: [],
    })
  })

  it('reads them the same with Windows line ends', () => {
    const vtt = 'WEBVTT\n\n00:00.000 --> 00:01.000\nOne\n\n00:01.000 --> 00:02.000\nTwo\n'
    expect(captions(vtt.replaceAll('\n', '\r\n'))).toEqual(captions(vtt))
  })

  // The lines are counted by hand, from 1.
  it.each([
    ['no signature', 'Captions\n\n00:00.000 --> 00:01.000\nOne\n', ['line 1']],
    ['an end before its beginning', 'WEBVTT\n\n00:02.000 --> 00:01.000\nOne\n', ['line 3']],
    ['a time nobody can read', 'WEBVTT\n\n00:00.000 --> 00:01.000\nOne\n\n00:02 --> 00:03.000\nTwo\n', ['line 6']],
    ['a comma as decimal mark', 'WEBVTT\n\n1\n00:00:01,000 --> 00:00:02,000\nOne\n', ['line 4']],
    ['one that begins before the one above it ends', 'WEBVTT\n\n00:00.000 --> 00:02.000\nOne\n\nNOTE between\n\n00:01.000 --> 00:03.000\nTwo\n', ['line 8']],
    ['words after the film has ended', 'WEBVTT\n\n00:00.000 --> 00:01.000\nOne\n\n00:10.000 --> 00:11.000\nTwo\n', ['line 6']],
    ['one that says nothing', 'WEBVTT\n\n00:00.000 --> 00:01.000\n<b></b>\n', ['line 3']],
    ['a screen full of words', `WEBVTT\n\n00:00.000 --> 00:01.000\n${'word '.repeat(120)}\n`, ['line 3']],
    ['nothing to show', 'WEBVTT\n', ['line 1']],
  ])('names the line of %s', (_what, vtt, lines) => {
    const { issues } = captions(vtt, 5)
    expect([...new Set(issues.map(issue => issue.path))]).toEqual(lines)
    expect(issues.every(issue => issue.message.length > 8)).toBe(true)
  })

  it('says of every mistake where it is', () => {
    const { issues } = captions('WEBVTT\n\n00:02.000 --> 00:01.000\nOne\n\n00:0x.000 --> 00:03.000\nTwo\n')
    expect([...new Set(issues.map(issue => issue.path))]).toEqual(['line 3', 'line 6'])
  })
})

describe('captions of a film', () => {
  let harness: Harness
  let school: TestSchool
  let api: Api
  let hanne: Caller
  let id: string
  const vtt = 'WEBVTT\n\n00:00.000 --> 00:01.000\nThe lip at twelve o\'clock\n'

  beforeAll(async () => {
    harness = await openHarness()
    school = await makeSchool(harness)
    api = await serveApi(harness)
    hanne = await api.as(school.hanne)
    const upload = await sendFile(hanne, readFileSync(new URL('../../fixtures/media/two-seconds.mp4', import.meta.url)), { purpose: 'lesson-media', filename: 'film.mp4', contentType: 'video/mp4' })
    id = (await hanne.post<MediaView>('/api/media', { uploadId: upload.id, title: 'Dummies', durationSeconds: 2 })).body.id
  })
  afterAll(async () => {
    await api?.close()
    await harness?.close()
  })

  const save = (change: Record<string, unknown> = {}, key?: string) => hanne.post<MediaView & { code: string, issues: { path: string, message: string }[] }>(`/api/media/${id}/tracks`, { kind: 'captions', vtt, ...change }, key)

  it('are kept as typed and read, and saved again take the place of those before', async () => {
    expect((await save({}, randomUUID())).body.tracks).toEqual([{ kind: 'captions', language: 'en', url: `/api/media/${id}/tracks/captions.vtt?language=en`, cues: [{ fromMs: 0, toMs: 1000, text: 'The lip at twelve o\'clock' }] }])
    const second = await save({ vtt: vtt.replace('twelve', 'six') })
    expect(second.body.tracks).toHaveLength(1)
    expect(second.body.tracks[0]?.cues[0]?.text).toBe('The lip at six o\'clock')
    const served = await hanne.get<string>(second.body.tracks[0]?.url ?? '')
    expect(served.headers.get('content-type')).toBe('text/vtt; charset=utf-8')
    expect(served.body).toContain('six o\'clock')
    await save({ kind: 'chapters', vtt: 'WEBVTT\n\n00:00.000 --> 00:02.000\nFit\n' })
    expect((await hanne.get<MediaView>(`/api/media/${id}`)).body.tracks.map(track => track.kind)).toEqual(['captions', 'chapters'])
  })

  it('with errors are refused, each by its line, and those before stay', async () => {
    await save()
    const answer = await save({ vtt: 'WEBVTT\n\n00:00.000 --> 00:01.000\nOne\n\n00:00.500 --> 00:01.500\nTwo\n\n00:09.000 --> 00:10.000\nThree\n' })
    expect(answer).toMatchObject({ status: 422, body: { code: 'captions_invalid', issues: [{ path: 'line 6' }, { path: 'line 9' }] } })
    expect((await school.em().findOneOrFail(MediaTrack, { asset: id, kind: 'captions' })).cues[0]?.text).toBe('The lip at twelve o\'clock')
  })

  it.each([
    ['an empty text', { vtt: ' ' }, 422, 'input_invalid'],
    ['NUL', { vtt: `${vtt}\0` }, 422, 'input_invalid'],
    ['a lone surrogate', { vtt: `${vtt}\ud800` }, 422, 'input_invalid'],
    ['a language that is none', { language: '../en' }, 422, 'input_invalid'],
    ['a kind of track nobody plays', { kind: 'metadata' }, 422, 'input_invalid'],
    ['half a million characters and one', { vtt: `WEBVTT\n\nNOTE ${'x'.repeat(500_000)}` }, 422, 'input_invalid'],
    ['three megabytes and more', { vtt: 'x'.repeat(3_100_000) }, 413, 'body_too_large'],
  ])('are refused with %s', async (_what, change, status, code) => {
    expect(await save(change)).toMatchObject({ status, body: { code } })
  })

  it('belong to a film that is there, and are an instructor\'s to write', async () => {
    expect(await hanne.post(`/api/media/${randomUUID()}/tracks`, { kind: 'captions', vtt })).toMatchObject({ status: 404, body: { code: 'media_not_found' } })
    expect((await (await api.as(school.imre)).post(`/api/media/${id}/tracks`, { kind: 'captions', vtt })).status).toBe(403)
    expect(await hanne.get(`/api/media/${id}/tracks/captions.vtt?language=fi`)).toMatchObject({ status: 404, body: { code: 'not_found' } })
    expect((await hanne.get(`/api/media/${id}/tracks/secrets.vtt`)).status).toBe(404)
  })
})
