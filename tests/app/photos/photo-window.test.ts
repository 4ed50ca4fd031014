import { describe, expect, it } from 'vitest'
import { keepInside, toPhoto, toWindow, wholePhoto, zoomAbout } from '~/components/photos/photo-window'

const window = { width: 400, height: 300 }

describe('photo window', () => {
  it('keeps the spot under the pointer where it is while zooming', () => {
    const about = { x: 300, y: 75 }
    let view = wholePhoto
    const before = toPhoto(about, view, window)
    for (const factor of [1.5, 2, 1.2, 0.8]) view = zoomAbout(view, factor, about, window)
    expect(view.scale).toBeCloseTo(2.88)
    expect(before).toEqual({ x: 0.75, y: 0.25 })
    expect(toPhoto(about, view, window)!.x).toBeCloseTo(0.75, 10)
    expect(toPhoto(about, view, window)!.y).toBeCloseTo(0.25, 10)
  })
  it('goes from the window to the photo and back', () => {
    // Worked by hand: at three times, moved by -200 and -150, the middle of a 400 x 300 window is at (200 + 200) / 1200 and (150 + 150) / 900.
    const view = { scale: 3, x: -200, y: -150 }
    const spot = toPhoto({ x: 200, y: 150 }, view, window)!
    expect(spot.x).toBeCloseTo(1 / 3, 12)
    expect(spot.y).toBeCloseTo(1 / 3, 12)
    expect(toWindow(spot, view, window).x).toBeCloseTo(200, 9)
    expect(toWindow(spot, view, window).y).toBeCloseTo(150, 9)
  })
  it('cannot be dragged out of sight nor made smaller than its window', () => {
    expect(keepInside({ scale: 0.2, x: 50, y: 50 }, window)).toEqual({ scale: 1, x: 0, y: 0 })
    expect(keepInside({ scale: 2, x: -9999, y: 9999 }, window)).toEqual({ scale: 2, x: -400, y: 0 })
  })
  it('has no spot outside the photo', () => {
    expect(toPhoto({ x: -1, y: 10 }, wholePhoto, window)).toBeNull()
    expect(toPhoto({ x: 10, y: 301 }, wholePhoto, window)).toBeNull()
  })
})
