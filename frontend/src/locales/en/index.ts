import type { LocaleMessageDictionary, VueMessageType } from 'vue-i18n'

type Messages = LocaleMessageDictionary<VueMessageType>

/** One file per area; the file's name is the first part of its keys: `feeds.title` stands in `feeds.ts`. */
const files = import.meta.glob<Messages>(['./*.ts', '!./index.ts'], { eager: true, import: 'default' })

const areas: Record<string, Messages> = {}
for (const [path, messages] of Object.entries(files)) {
  areas[path.slice(2, -3)] = messages
}

export default areas
