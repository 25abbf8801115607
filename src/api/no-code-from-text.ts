import { config } from 'zod';

// The contract's parser would else try whether it may make code from text, which the content security policy refuses and reports.
config({ jitless: true });
