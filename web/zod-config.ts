import { z } from 'zod';

// Under our content security policy zod must not probe for compiled validators; it has to know before the first schema.
z.config({ jitless: true });
