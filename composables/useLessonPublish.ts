import { ref, shallowRef } from 'vue'
import type { Failure } from '#shared/contract/failure'
import type { LessonDocument } from '#shared/contract/lesson-document'
import type { LessonPublished, PreviewView, PublishProblem } from '#shared/contract/lessons'
import { useApi } from './useApi'

/** Looking at a draft as students would, and publishing it. What publishing would refuse comes with the look, each with where it is. */
export function useLessonPublish(slug: string) {
  const api = useApi()
  const preview = shallowRef<PreviewView | null>(null)
  const previewing = ref(false)
  const problems = shallowRef<PublishProblem[]>([])
  const failure = ref<Failure | null>(null)
  const publishing = ref(false)
  const publishFailure = ref<Failure | null>(null)
  const published = shallowRef<LessonPublished | null>(null)
  let key = crypto.randomUUID()

  async function look(text: { title: string, document: LessonDocument }): Promise<boolean> {
    previewing.value = true
    const answer = await api.post<PreviewView>(`/api/lessons/${slug}/preview`, text)
    previewing.value = false
    failure.value = answer.ok ? null : answer.failure
    preview.value = answer.ok ? answer.value : null
    problems.value = answer.ok ? answer.value.problems : problemsOf(answer.failure)
    return answer.ok
  }

  /** `seen` is the revision that was looked at: a draft somebody saved meanwhile is not published unread. */
  async function publish(seen: number, words: { whatChanged: string, why: string }): Promise<boolean> {
    publishing.value = true
    published.value = null
    const answer = await api.post<LessonPublished>(`/api/lessons/${slug}/publish`, { seen, ...words }, key)
    publishing.value = false
    publishFailure.value = answer.ok ? null : answer.failure
    if (answer.ok || answer.failure.status) key = crypto.randomUUID()
    if (answer.ok) published.value = answer.value
    else problems.value = problemsOf(answer.failure)
    return answer.ok
  }

  return { preview, previewing, problems, failure, look, publishing, publishFailure, published, publish }
}

/** A refusal's issues as problems to go to. */
function problemsOf(failure: Failure): PublishProblem[] {
  return failure.issues.filter(issue => issue.path.startsWith('content.') || issue.path.startsWith('document.content.')).map(issue => ({ path: issue.path.replace(/^document\./, ''), code: failure.code as PublishProblem['code'], message: issue.message }))
}
