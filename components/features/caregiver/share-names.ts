// The switches of what a caregiver may see, in the order in which they are shown.

import type { z } from 'zod';
import type { Shares } from '@/shared/contracts/caregiver';

export const shareNames = ['adherence', 'diary', 'missedMail'] as const satisfies readonly (keyof z.infer<typeof Shares>)[];
