import { readdirSync, readFileSync } from 'node:fs'
import { join } from 'node:path'
import { XMLValidator } from 'fast-xml-parser'
import { expect, it } from 'vitest'
import { projectRoot } from '../../scripts/lib/project-root'

const drawings = readdirSync(join(projectRoot, 'public/drawings')).filter(name => name.endsWith('.svg'))
const lessons = readdirSync(join(projectRoot, 'content/lessons')).filter(name => /^\d\d-.*\.md$/.test(name)).map(name => readFileSync(join(projectRoot, 'content/lessons', name), 'utf8'))
const used = lessons.flatMap(lesson => [...lesson.matchAll(/^ *::: figure drawing=(\S+) alt="([^"]*)" caption="([^"]*)"$/gm)]).map(([, drawing = '', alt = '', caption = '']) => ({ drawing, alt, caption }))

it('shows every drawing in some lesson, and no drawing that is not there', () => {
  expect([...new Set(used.map(one => `${one.drawing}.svg`))].sort()).toEqual([...drawings].sort())
  expect(drawings.length).toBeGreaterThanOrEqual(6)
})

it('says in words what each drawing shows', () => {
  for (const { drawing, alt, caption } of used) {
    expect(alt.length, drawing).toBeGreaterThan(60)
    expect(caption.length, drawing).toBeGreaterThan(10)
  }
})

it.each(drawings)('%s is a drawing and nothing more: on paper of its own, its words as text, large enough on a phone', (name) => {
  const svg = readFileSync(join(projectRoot, 'public/drawings', name), 'utf8')
  expect(XMLValidator.validate(svg)).toBe(true)
  expect(svg).not.toMatch(/<script|<foreignObject|<image|<use|href=|\son\w+=|url\((?!#)/i)
  // Its own ground, so that it reads on a dark page too.
  expect(svg).toMatch(/<rect width="440" height="\d+" fill="#fcfcfa"\/>/)
  expect(svg).toMatch(/<title>[^<]{20,}<\/title>/)
  // A phone's column is 358 px wide: the smallest letters of a 440 wide drawing stay at 11 px.
  const sizes = [...svg.matchAll(/font-size="([\d.]+)"/g)].map(([, size]) => Number(size))
  expect(Math.min(...sizes) * 358 / 440).toBeGreaterThanOrEqual(10.9)
})
