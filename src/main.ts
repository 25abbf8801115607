import '@/api/no-code-from-text.ts';
import { giveStylesTheNonce } from '@/theme/style-nonce.ts';
import { startApp } from '@/start-app.ts';
import '@/theme/fonts.css';
import '@/theme/base.css';

// Before anything renders: the component library makes its style elements while it does.
giveStylesTheNonce();
startApp('#app');
