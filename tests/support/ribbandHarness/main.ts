import { createApp } from 'vue'
import '@fontsource-variable/familjen-grotesk/wght.css'
import '@fontsource-variable/sofia-sans-semi-condensed/wght.css'
import '../../../app/assets/main.css'
import StripHarness from './StripHarness.vue'

createApp(StripHarness).mount('#app')
