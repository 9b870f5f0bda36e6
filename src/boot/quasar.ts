import { Dark, Dialog, Notify, Quasar } from 'quasar'
import type { App } from 'vue'
import { iconPaths } from '#src/components/base/icon-paths.ts'

/** Quasar's own arrows and crosses, replaced by ours: `M` paths on a 24 grid are its SVG icon format. */
function stroke(name: keyof typeof iconPaths): string {
  return `${iconPaths[name].paths.join('')}@@fill:none;stroke:currentColor;stroke-width:2|0 0 24 24`
}

export function installQuasar(app: App): void {
  app.use(Quasar, {
    plugins: { Dark, Dialog, Notify },
    config: { dark: 'auto', notify: { position: 'bottom', timeout: 6000, classes: 'notice' } },
  })
  const icons = Quasar as unknown as { iconSet?: { arrow?: { dropdown: string }; field?: { clear: string } } }
  if (icons.iconSet?.arrow) icons.iconSet.arrow.dropdown = stroke('down')
  if (icons.iconSet?.field) icons.iconSet.field.clear = stroke('close')
}
