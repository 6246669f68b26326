/** Tokens of links: 128 bits from the system's generator, kept only as a hash. */
import { createHash, randomBytes } from 'node:crypto';

export const newToken = (): string => randomBytes(16).toString('base64url');
export const hashToken = (token: string): Buffer => createHash('sha256').update(token).digest();
