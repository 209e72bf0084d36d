import type { Config } from '../config/config.js';

/** Pages of the client that a mail leads to (src/app/paths.ts). */
export const invitationLink = (config: Config, secret: string): string => `${config.publicUrl}/invitation/${secret}`;
export const passwordResetLink = (config: Config, secret: string): string => `${config.publicUrl}/reset/${secret}`;
