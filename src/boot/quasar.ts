import { Dark, Dialog, Notify, Quasar } from 'quasar'
import svgIcons from 'quasar/icon-set/svg-material-icons'
import type { App } from 'vue'
import { iconPaths } from '#src/components/base/icon-paths.ts'

/** One of our glyphs in Quasar's own SVG form: path, style, view box. */
const ours = (name: keyof typeof iconPaths): string =>
  `${iconPaths[name].paths.join('')}@@fill:none;stroke:currentColor;stroke-width:2|0 0 24 24`

/** Quasar with the few parts we use, its arrows and crosses replaced by ours. */
export function installQuasar(app: App): void {
  app.use(Quasar, {
    plugins: { Dark, Dialog, Notify },
    iconSet: {
      ...svgIcons,
      arrow: { ...svgIcons.arrow, dropdown: ours('down') },
      chip: { ...svgIcons.chip, remove: ours('close') },
      field: { ...svgIcons.field, clear: ours('close') },
    },
    config: { notify: { position: 'bottom', timeout: 6000 } },
  })
}
