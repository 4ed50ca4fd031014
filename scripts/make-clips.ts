/**
 * `npm run clips`: draws the films of content/media again, from the scenes in scripts/clips. Only whoever changes a scene needs it, and
 * with it Chromium and ffmpeg; the films are kept in the repository, and nothing else asks for either.
 */
import { spawn } from 'node:child_process'
import { once } from 'node:events'
import { mkdirSync, readFileSync, writeFileSync } from 'node:fs'
import { join } from 'node:path'
import { chromium, type Page } from '@playwright/test'
import { ballTouch } from './clips/ball-touch'
import { dummyValves } from './clips/dummy-valves'
import { framesASecond, height, width, type Scene } from './clips/scene'
import { projectRoot } from './lib/project-root'
import { runCommand } from './lib/run-command'

const font = readFileSync(join(projectRoot, 'node_modules/@fontsource-variable/archivo/files/archivo-latin-standard-normal.woff2')).toString('base64')
const page = `<style>@font-face { font-family: 'Archivo Variable'; font-weight: 100 900; src: url(data:font/woff2;base64,${font}) } body { margin: 0 } svg { display: block }</style><div></div>`

async function show(browser: Page, svg: string): Promise<Buffer> {
  await browser.evaluate((drawing) => {
    const place = document.querySelector('div')
    if (place) place.innerHTML = drawing
  }, svg)
  return browser.screenshot({ type: 'png' })
}

async function make(browser: Page, scene: Scene): Promise<void> {
  const file = join(projectRoot, `content/media/${scene.name}.mp4`)
  const ffmpeg = spawn('ffmpeg', ['-v', 'error', '-y', '-f', 'image2pipe', '-framerate', String(framesASecond), '-i', '-', '-c:v', 'libx264', '-preset', 'veryslow', '-crf', '31', '-tune', 'animation', '-pix_fmt', 'yuv420p', '-g', '24', '-movflags', '+faststart', '-an', file], { stdio: ['pipe', 'inherit', 'inherit'] })
  const ended = once(ffmpeg, 'exit')
  for (let index = 0; index < scene.seconds * framesASecond; index += 1) {
    const picture = await show(browser, scene.draw(index / framesASecond))
    if (!ffmpeg.stdin.write(picture)) await once(ffmpeg.stdin, 'drain')
  }
  ffmpeg.stdin.end()
  const [code] = await ended as [number]
  if (code !== 0) throw new Error(`ffmpeg ended with ${code}`)
}

await runCommand(async () => {
  const browser = await chromium.launch({ executablePath: process.env.CHROMIUM ?? '/usr/bin/chromium', args: ['--no-sandbox'] })
  try {
    const tab = await browser.newPage({ viewport: { width, height } })
    await tab.setContent(page)
    for (const scene of [dummyValves, ballTouch]) {
      // To look at single moments without making a film: CLIP_MOMENTS=2,6.5 npm run clips
      const moments = process.env.CLIP_MOMENTS?.split(',').map(Number) ?? []
      for (const second of moments) {
        mkdirSync(join(projectRoot, 'test-results/clips'), { recursive: true })
        writeFileSync(join(projectRoot, `test-results/clips/${scene.name}-${second}.png`), await show(tab, scene.draw(second)))
      }
      if (moments.length === 0) await make(tab, scene)
    }
  }
  finally {
    await browser.close()
  }
})
