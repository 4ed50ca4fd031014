/** Something a person can put right: printed as its sentence, without a stack, and the command ends with 1. */
export class Problem extends Error {
  override name = 'Problem'
}
