import './boot/zod-jitless.ts'
import 'quasar/dist/quasar.css'
import './css/fonts.css'
import './css/tokens.css'
import './css/base.css'
import { createPinia } from 'pinia'
import { createApp } from 'vue'
import App from './App.vue'
import { startOffline } from './boot/offline.ts'
import { installQuasar } from './boot/quasar.ts'
import { makeRouter } from './router/index.ts'
import { useSessionStore } from './stores/session.ts'
import { useSettingsStore } from './stores/settings.ts'

const app = createApp(App)
app.use(createPinia())
installQuasar(app)
useSettingsStore()
const router = makeRouter(useSessionStore())
app.use(router)
startOffline()
void router.isReady().then(() => app.mount('#app'))
