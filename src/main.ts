import { createPinia } from 'pinia'
import { Quasar } from 'quasar'
import { createApp } from 'vue'
import App from './App.vue'
import { hearAnswers } from './boot/hearAnswers.ts'
import { createOffingRouter } from './router/index.ts'
import { useDisplay } from './stores/display.ts'
import './css/fonts.css'
import 'quasar/src/css/index.sass'
import './css/base.css'
import './css/parts.css'
import './css/alerts.css'
import './css/tokens.css'

const app = createApp(App).use(createPinia()).use(Quasar, {})
useDisplay()
hearAnswers()
app.use(createOffingRouter()).mount('#offing')
