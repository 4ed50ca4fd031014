/** The words of a text, small, each once, in order of the alphabet; figures and what is shorter than three letters are none. */
export function distinctWords(text: string): string[] {
  return [...new Set(text.toLowerCase().match(/\p{L}{3,40}/gu) ?? [])].sort()
}
