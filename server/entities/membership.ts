import { EntitySchema } from 'typeorm';
import type { Role } from '../../shared/session.ts';
import { LabEntity, type Lab } from './lab.ts';
import { PersonEntity } from './person.ts';

export interface Membership {
  labId: string;
  personId: string;
  role: Role;
  lab?: Lab;
}

export const MembershipEntity = new EntitySchema<Membership>({
  name: 'membership',
  columns: {
    labId: { type: 'uuid', primary: true, primaryKeyConstraintName: 'membership_pk' },
    personId: {
      type: 'uuid',
      primary: true,
      primaryKeyConstraintName: 'membership_pk',
      foreignKey: { target: PersonEntity, name: 'membership_person_fk', onDelete: 'CASCADE' },
    },
    role: { type: 'text' },
  },
  relations: {
    lab: {
      type: 'many-to-one',
      target: LabEntity,
      joinColumn: { name: 'lab_id', foreignKeyConstraintName: 'membership_lab_fk' },
      onDelete: 'CASCADE',
    },
  },
  indices: [{ name: 'membership_person_idx', columns: ['personId'] }],
});
