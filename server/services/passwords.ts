import { createHash } from 'node:crypto';
import bcrypt from 'bcryptjs';

const COST = 10;

/** bcrypt reads 72 bytes at most; a digest of any password fits and keeps all of it. */
const digest = (password: string) =>
  createHash('sha384').update(password.normalize('NFC'), 'utf8').digest('base64');

export const hashPassword = (password: string): Promise<string> => bcrypt.hash(digest(password), COST);

export const passwordMatches = (password: string, hash: string): Promise<boolean> =>
  bcrypt.compare(digest(password), hash);
