import type { Checked, ComputeInput } from './computable'

/** One thing wrong with what came in. */
export interface InputIssue { path: string, message: string }

/** What came in cannot be computed with; every issue is named. */
export class InputsRefused extends RangeError {
  constructor(readonly issues: readonly InputIssue[]) {
    super(issues.map(issue => `${issue.path}: ${issue.message}`).join('; '))
    this.name = 'InputsRefused'
  }
}

/**
 * Checks inputs given by somebody else against what a quantity takes: kind, bounds, lengths, nothing missing, nothing unknown.
 *
 * @throws {InputsRefused} naming every input that is wrong
 */
export function checkInputs(inputs: readonly ComputeInput[], given: unknown): Checked {
  if (typeof given !== 'object' || given === null || Array.isArray(given)) throw new InputsRefused([{ path: '', message: 'give the inputs as an object' }])
  const values = new Map<string, unknown>(Object.entries(given))
  const issues: InputIssue[] = []
  for (const name of values.keys()) {
    if (!inputs.some(input => input.name === name)) issues.push({ path: name, message: `is not an input; it takes ${inputs.map(input => input.name).join(', ')}` })
  }
  for (const input of inputs) {
    const value = values.get(input.name)
    if (value === undefined || value === null) {
      if (!input.optional) issues.push({ path: input.name, message: 'is missing' })
      continue
    }
    issues.push(...issuesOf(input, value))
  }
  if (issues.length > 0) throw new InputsRefused(issues)

  const numberOrNull = (name: string): number | null => {
    const value = values.get(name)
    return typeof value === 'number' ? value : null
  }
  const numbersOrNull = (name: string): number[] | null => {
    const value = values.get(name)
    return Array.isArray(value) ? value.filter((one): one is number => typeof one === 'number') : null
  }
  const textOrNull = (name: string): string | null => {
    const value = values.get(name)
    return typeof value === 'string' ? value : null
  }
  return {
    numberOrNull,
    numbersOrNull,
    textOrNull,
    number: name => numberOrNull(name) ?? absent(name),
    numbers: name => numbersOrNull(name) ?? absent(name),
    text: name => textOrNull(name) ?? absent(name),
  }
}

/** Only a quantity that asks for what it does not declare comes here. */
function absent(name: string): never {
  throw new RangeError(`${name} was not given`)
}

function issuesOf(input: ComputeInput, value: unknown): InputIssue[] {
  const issue = (message: string, path = input.name): InputIssue[] => [{ path, message }]
  switch (input.kind) {
    case 'number': case 'integer': {
      if (typeof value !== 'number' || !Number.isFinite(value)) return issue('is not a number')
      if (input.kind === 'integer' && !Number.isInteger(value)) return issue('is not a whole number')
      return value >= input.least && value <= input.most ? [] : issue(`must be from ${input.least} to ${input.most} ${input.unit}`.trim())
    }
    case 'numbers': {
      if (!Array.isArray(value)) return issue('is not a list of numbers')
      if (value.length < input.fewest || value.length > input.longest) return issue(`takes ${input.fewest} to ${input.longest} numbers`)
      return value.flatMap((one: unknown, index) => {
        if (typeof one !== 'number' || !Number.isFinite(one)) return issue('is not a number', `${input.name}.${index}`)
        return one >= input.least && one <= input.most ? [] : issue(`must be from ${input.least} to ${input.most} ${input.unit}`.trim(), `${input.name}.${index}`)
      })
    }
    case 'choice':
      return typeof value === 'string' && input.choices.includes(value) ? [] : issue(`is one of ${input.choices.join(', ')}`)
    case 'text':
      return typeof value === 'string' && value.length > 0 && value.length <= input.longest ? [] : issue(`is text of at most ${input.longest} characters`)
  }
}
