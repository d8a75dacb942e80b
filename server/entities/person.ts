import { EntitySchema } from 'typeorm';

export interface Person {
  id: string;
  /** Lower case. */
  email: string;
  name: string;
  passwordHash: string;
  disabledAt: Date | null;
  createdAt: Date;
}

export const PersonEntity = new EntitySchema<Person>({
  name: 'person',
  columns: {
    id: { type: 'uuid', primary: true, primaryKeyConstraintName: 'person_pk' },
    email: { type: 'text' },
    name: { type: 'text' },
    passwordHash: { type: 'text', select: false },
    disabledAt: { type: 'timestamptz', nullable: true },
    createdAt: { type: 'timestamptz', default: () => 'now()' },
  },
  uniques: [{ name: 'person_email_key', columns: ['email'] }],
  checks: [{ name: 'person_email_lower_case', expression: 'email = lower(email)' }],
});
