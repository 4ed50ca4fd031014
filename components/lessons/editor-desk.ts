import type { InjectionKey, Ref } from 'vue'
import type { MediaView } from '#shared/contract/media'

export interface CriterionChoice { id: string, title: string, stage: string }

/** What the blocks inside the editor need of the desk they lie on. */
export interface EditorDesk {
  criteria: Ref<readonly CriterionChoice[]>
  /** Pictures and films by id, as far as they are known. */
  media: Ref<Readonly<Record<string, MediaView>>>
  /** Asks for another picture, film or criterion, for the block that stands at this position. */
  choose: (kind: 'figure' | 'clip' | 'limit', position: number) => void
}

export const editorDesk: InjectionKey<EditorDesk> = Symbol('editor desk')
