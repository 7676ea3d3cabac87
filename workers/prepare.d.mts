export const root: string
export function say(text: string): void
export function refuse(text: string): never
export function checkNode(): void
export function installPackages(): void
export function installDebianPackages(names: ('postgresql' | 'ffmpeg' | 'chromium')[]): void
export function sourcesHash(): string
export function buildSite(): void
