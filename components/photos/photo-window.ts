/** How a photo lies in its window: `scale` 1 shows all of it; `x`, `y` are where its top left corner is, in pixels of the window. */
export interface PhotoWindow { scale: number, x: number, y: number }
export interface Size { width: number, height: number }
export interface Spot { x: number, y: number }

export const wholePhoto: PhotoWindow = { scale: 1, x: 0, y: 0 }
const most = 12

/**
 * The photo kept in its window: it cannot be dragged out of sight nor made smaller than the window.
 * The window has the photo's own shape, so at scale 1 it fills it.
 */
export function keepInside(view: PhotoWindow, window: Size): PhotoWindow {
  const scale = Math.min(most, Math.max(1, view.scale))
  const kept = (at: number, length: number) => Math.min(0, Math.max(length * (1 - scale), at)) || 0
  return { scale, x: kept(view.x, window.width), y: kept(view.y, window.height) }
}

/** Zoomed by `factor` about a point of the window, which stays on the same spot of the photo. */
export function zoomAbout(view: PhotoWindow, factor: number, about: Spot, window: Size): PhotoWindow {
  const scale = Math.min(most, Math.max(1, view.scale * factor))
  const grown = scale / view.scale
  return keepInside({ scale, x: about.x - (about.x - view.x) * grown, y: about.y - (about.y - view.y) * grown }, window)
}

/** Where a point of the window lies on the photo, as shares of its width and height, 0 to 1. Null outside the photo. */
export function toPhoto(point: Spot, view: PhotoWindow, window: Size): Spot | null {
  const x = (point.x - view.x) / (window.width * view.scale)
  const y = (point.y - view.y) / (window.height * view.scale)
  return x >= 0 && x <= 1 && y >= 0 && y <= 1 ? { x, y } : null
}

/** Where a spot of the photo is in the window. */
export function toWindow(spot: Spot, view: PhotoWindow, window: Size): Spot {
  return { x: view.x + spot.x * window.width * view.scale, y: view.y + spot.y * window.height * view.scale }
}
