import { bottomScenes } from './bottom'
import { bowScenes } from './bowBench'
import { chineScenes } from './chines'
import { frameScenes } from './frames'
import type { Scene } from './scene'
import { shopScenes } from './shop'
import { sideScenes } from './sides'
import { strongbackScenes } from './strongback'

/** Every shot that the script may name. */
export const scenes: Record<string, Scene> = {
  ...shopScenes, ...bowScenes, ...frameScenes, ...strongbackScenes, ...chineScenes, ...sideScenes, ...bottomScenes,
}
