/**
 * `npm run bench`: what the school costs, as ratios of figures taken in one run on one machine, so that they mean the same on another.
 * `npm run bench -- sheets pages` measures those alone. Prints and never fails on a time: what is too slow is for a person to see.
 */
import { median } from '../shared/domain/uncertainty/median'
import { startSchool } from '../tests/e2e/start-school'
import { pageTimes } from './bench/page-times'
import { pagesToVisit } from './bench/pages-to-visit'
import { scoreTimes } from './bench/score-times'
import { scriptWeights } from './bench/script-weight'
import { sheetSpeed } from './bench/sheet-speed'
import { signInAs } from './bench/visitor'
import { ensureBuild } from './lib/ensure-build'
import { Problem } from './lib/problem'
import { runCommand } from './lib/run-command'
import { readSettings } from './lib/settings'

const parts = ['sheets', 'pages', 'score', 'script'] as const
/** DESIGN's figures: times the base page, ms from Ask to visible, kB (1,000 bytes) of script sent gzipped. */
const target = { page: 2, scoreMs: 1000, scriptKb: 150 }
const say = (line = '') => void process.stdout.write(`${line}\n`)
const verdict = (value: number, most: number) => value <= most ? '' : '  <- over'

await runCommand(async () => {
  const asked = process.argv.slice(2)
  const unknown = asked.filter(name => !(parts as readonly string[]).includes(name))
  if (unknown.length > 0) throw new Problem(`There is no part called ${unknown.join(', ')}. They are: ${parts.join(', ')}.`)
  const wanted = (part: typeof parts[number]) => asked.length === 0 || asked.includes(part)

  if (wanted('sheets')) {
    const { sheets, perSecond, barePerSecond, timesBare } = sheetSpeed()
    say('Flow sheets read')
    say(`  ${perSecond.toFixed(0)} a second (${sheets} practice sheets over and over); a bare split into cells does ${barePerSecond.toFixed(0)}, so reading one takes ${timesBare.toFixed(1)} times as long`)
  }
  if (!(['pages', 'score', 'script'] as const).some(wanted)) return

  await ensureBuild(readSettings(process.env).dataDir, say)
  const school = await startSchool('bench', null)
  try {
    const [student, alumna, instructor, office] = [await signInAs(school.url, 'Imre'), await signInAs(school.url, 'Freya'), await signInAs(school.url, 'Hanne'), await signInAs(school.url, 'Corin')]
    const pages = await pagesToVisit({ student, alumna, instructor, office })
    let baseMs: number | null = null
    if (wanted('pages') || wanted('score')) {
      const timed = await pageTimes(school.url, wanted('pages') ? pages : pages.slice(0, 1))
      baseMs = timed.baseMs
      if (wanted('pages')) {
        say(`\nPage server time, times the empty signed-in page with one trivial query (${baseMs.toFixed(1)} ms): at most ${target.page}`)
        for (const { page, ms, ratio } of timed.times) say(`  ${page.who.padEnd(10)}  ${page.name.padEnd(16)}  ${ratio.toFixed(2).padStart(5)}   (${ms.toFixed(1)} ms)${verdict(ratio, target.page)}`)
      }
    }
    if (wanted('script')) {
      say(`\nScript on a first visit, until the network is idle, kB gzipped: at most ${target.scriptKb} for a student, in ratio to that`)
      for (const { page, files, bytes } of await scriptWeights(school.url, pages)) {
        const kb = bytes / 1000
        say(`  ${page.who.padEnd(10)}  ${page.name.padEnd(16)}  ${(kb / target.scriptKb).toFixed(2).padStart(5)}   (${kb.toFixed(1)} kB in ${files} files)${page.who === 'student' ? verdict(kb, target.scriptKb) : ''}`)
      }
    }
    // Last: it changes what the school holds.
    if (wanted('score') && baseMs !== null) {
      const students = await Promise.all(['Bettany', 'Osric', 'Nadia', 'Tomek', 'Ruth', 'Dele', 'Wen', 'Imre'].map(name => signInAs(school.url, name)))
      const times = await scoreTimes(school.url, students)
      say(`\nFrom Ask to visible, no photos: at most ${target.scoreMs} ms; in times the empty page`)
      for (const { who, op, readings, ms } of times) say(`  ${who.padEnd(10)}  op ${String(op).padEnd(3)} ${String(readings).padStart(4)} readings  ${(ms / baseMs).toFixed(1).padStart(5)}   (${ms.toFixed(0)} ms)${verdict(ms, target.scoreMs)}`)
      const middle = median(times.map(one => one.ms))
      say(`  median                      ${(middle / baseMs).toFixed(1).padStart(5)}   (${middle.toFixed(0)} ms)${verdict(middle, target.scoreMs)}`)
    }
  }
  finally {
    await school.stop()
  }
  process.exit(0)
})
