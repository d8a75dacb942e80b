import type { DataSource } from 'typeorm';
import { PersonEntity } from '../entities/person.ts';
import { hashPassword, passwordMatches } from './passwords.ts';

/** Held against the passwords of unknown addresses, so that both answers take the same time. */
const nobodysHash = hashPassword('no person has this password');

/** The person's id where address and password fit and the person isn't disabled, else null. */
export async function checkPassword(
  dataSource: DataSource,
  email: string,
  password: string,
): Promise<string | null> {
  const person = await dataSource.getRepository(PersonEntity).findOne({
    where: { email: email.trim().toLowerCase() },
    select: { id: true, passwordHash: true, disabledAt: true },
  });
  const matches = await passwordMatches(password, person?.passwordHash ?? (await nobodysHash));
  return person && matches && person.disabledAt === null ? person.id : null;
}
