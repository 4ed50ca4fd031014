import { readFileSync } from 'node:fs'
import ts from 'typescript'

/**
 * The names of the tests in a file as a runner would print them: those of a table row by row, where the table stands in the file and
 * its first column is text.
 */
export function testNames(file: string): string[] {
  const names: string[] = []
  const visit = (node: ts.Node): void => {
    if (ts.isCallExpression(node) && isTest(node.expression)) {
      const [title] = node.arguments
      if (title && ts.isStringLiteralLike(title)) names.push(...named(title.text, node.expression))
    }
    ts.forEachChild(node, visit)
  }
  visit(ts.createSourceFile(file, readFileSync(file, 'utf8'), ts.ScriptTarget.Latest))
  return names
}

/** `it`, `test`, `it.each(table)`; not `it.skip` and the like: a test that does not run holds nothing. */
function isTest(called: ts.Expression): boolean {
  if (ts.isIdentifier(called)) return called.text === 'it' || called.text === 'test'
  return ts.isCallExpression(called) && ts.isPropertyAccessExpression(called.expression) && called.expression.name.text === 'each' && isTest(called.expression.expression)
}

function named(title: string, called: ts.Expression): string[] {
  if (!ts.isCallExpression(called)) return [title]
  const [given] = called.arguments
  const table = given && ts.isAsExpression(given) ? given.expression : given
  const rows = table && ts.isArrayLiteralExpression(table) ? table.elements : []
  const firsts = rows.flatMap((row) => {
    const first = ts.isArrayLiteralExpression(row) ? row.elements[0] : row
    return first && ts.isStringLiteralLike(first) ? [first.text] : []
  })
  return [title, ...firsts.map(first => title.replace('%s', () => first))]
}
