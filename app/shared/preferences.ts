import * as z from 'zod';

/** What a user sets once: kept beside the program's own data, not in the test file. */
export const preferencesSchema = z.object({
  /** How amplitudes are stated everywhere: zero-to-peak, peak-to-peak or RMS. */
  amplitudeAs: z.enum(['peak', 'peak-to-peak', 'rms']).default('peak'),
  theme: z.enum(['system', 'light', 'dark']).default('system'),
  /** Text size, percent of the normal one. */
  textPercent: z.number().int().min(100).max(200).default(100),
});

/** What a user sets once. */
export type Preferences = z.infer<typeof preferencesSchema>;

/** The preferences of somebody who has set none. */
export const DEFAULT_PREFERENCES: Preferences = preferencesSchema.parse({});
