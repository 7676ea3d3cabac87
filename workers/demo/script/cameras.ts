import type { Camera } from '../types'

export const benchPhone: Camera = { name: 'Bench phone', width: 1280, height: 720, rotation: 0 }
export const ivosPhone: Camera = { name: 'Ivo’s phone', width: 720, height: 1280, rotation: 90 }
export const shelfCamera: Camera = { name: 'Shelf camera', width: 960, height: 720, rotation: 0 }
