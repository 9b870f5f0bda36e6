import { z } from 'zod'

// zod's compiled parsers need eval, which the content security policy refuses. Imported before any schema is used.
z.config({ jitless: true })
