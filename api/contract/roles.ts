import { z } from 'zod';

/** What a person may do in an organisation; several may be held at once. */
export const Role = z.enum(['underwriter', 'modeler', 'admin', 'auditor']);
export type Role = z.infer<typeof Role>;

/** May see sites, tracks and results. Account admins see runs and money but no site data. */
export const READERS = ['underwriter', 'modeler', 'auditor'] as const satisfies readonly Role[];
/** May change portfolios and start runs. */
export const UNDERWRITERS = ['underwriter', 'modeler'] as const satisfies readonly Role[];
/** May write tracks. Underwriters may draw their own what-if tracks too. */
export const TRACK_WRITERS = ['modeler', 'underwriter'] as const satisfies readonly Role[];
export const EVERY_ROLE = ['underwriter', 'modeler', 'admin', 'auditor'] as const satisfies readonly Role[];
export const MONEY_READERS = ['underwriter', 'modeler', 'admin', 'auditor'] as const satisfies readonly Role[];
/** May draft calibrations. */
export const MODELERS = ['modeler'] as const satisfies readonly Role[];
export const ADMINS = ['admin'] as const satisfies readonly Role[];
