import type { LessonSummary } from '../../shared/contract/lessons'
import type { PlaceRow } from '../../shared/contract/places'
import type { BenchView, FeedbackView, Page, QueueItem, SubmissionView } from '../../shared/contract/views'
import { Problem } from '../lib/problem'
import type { Visitor } from './visitor'

export interface PageToVisit { who: 'student' | 'alumna' | 'instructor' | 'office', visitor: Visitor, name: string, path: string }

/** The emptiest signed-in page: a heading, and one trivial query (the sessions of who looks). What other pages are compared with. */
export const basePath = '/account'

/**
 * Every page of a student's, an alumna's, an instructor's and the office's day, with ids of the running school filled in.
 *
 * @throws {Problem} where the school has nothing to show on one of them: an empty page would flatter
 */
export async function pagesToVisit({ student, alumna, instructor, office }: { student: Visitor, alumna: Visitor, instructor: Visitor, office: Visitor }): Promise<PageToVisit[]> {
  const bench = await student.get<BenchView>('/api/bench')
  const head = bench.head ?? missing('head on the student\'s bench')
  const tries = head.stages.flatMap(stage => stage.submission ?? [])
  const [lesson = missing('lesson')] = await student.get<LessonSummary[]>('/api/lessons')
  const [letter = missing('feedback')] = (await student.get<Page<FeedbackView>>('/api/feedback')).items
  const queue = (await instructor.get<Page<QueueItem>>('/api/review-queue')).items
  const waiting = queue.find(item => item.state === 'scored') ?? missing('scored submission in the review queue')
  const [place = missing('place')] = (await office.get<Page<PlaceRow>>('/api/places?search=agnes')).items
  // The fullest proof tray of the head stands for all of them.
  const trays = await Promise.all(tries.map(one => student.get<SubmissionView>(`/api/submissions/${one.id}`)))
  const tray = trays.sort((a, b) => weight(b) - weight(a))[0] ?? missing('proof tray')
  const of = (who: PageToVisit['who'], visitor: Visitor, paths: Record<string, string>): PageToVisit[] => Object.entries(paths).map(([name, path]) => ({ who, visitor, name, path }))
  return [
    ...of('student', student, {
      '/bench': '/bench', '/route-card': '/route-card', '/proof/:id': `/proof/${tray.id}`, '/proof/:id/read': `/proof/${tray.id}/read`, '/heads/:id': `/heads/${head.id}`,
      '/lessons': '/lessons', '/lessons/:slug': `/lessons/${lesson.slug}`, '/feedback': '/feedback', '/feedback/:id': `/feedback/${letter.submissionId}`,
    }),
    ...of('instructor', instructor, { '/review': '/review', '/review/:id': `/review/${waiting.id}`, '/heads/:id': `/heads/${waiting.head.id}`, '/shop-board': '/shop-board' }),
    ...of('alumna', alumna, { '/shelf': '/shelf', '/my-record': '/my-record' }),
    ...of('office', office, { '/places': '/places', '/places/:id': `/places/${place.id}`, '/money-book': '/money-book', '/people': '/people', '/records': '/records' }),
  ]
}

const weight = (view: SubmissionView) => view.readings.length + view.photos.length + view.sheets.length

function missing(what: string): never {
  throw new Problem(`The school that was seeded has no ${what}, so there is nothing to measure there.`)
}
