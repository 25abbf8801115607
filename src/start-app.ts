import { VueQueryPlugin } from '@tanstack/vue-query';
import { createPinia } from 'pinia';
import { createApp } from 'vue';
import App from '@/App.vue';
import { createQueryClient } from '@/api/query-client.ts';
import { createAppRouter } from '@/router/router.ts';
import { installThemeStyleSheet } from '@/theme/tokens.ts';

export function startApp(container: string): void {
  installThemeStyleSheet();
  createApp(App)
    .use(createPinia())
    .use(VueQueryPlugin, { queryClient: createQueryClient() })
    .use(createAppRouter())
    .mount(container);
}
