import { createContext, use } from 'react';
import type { Session } from '../../shared/session.ts';

export type Lab = Session['labs'][number];

export interface LabPlace {
  session: Session;
  lab: Lab;
  switchLab: (id: string) => void;
}

export const LabContext = createContext<LabPlace | null>(null);

/** The lab that the person works in now. Only inside the page shell. */
export function useLab(): LabPlace {
  const place = use(LabContext);
  if (place === null) throw new Error('useLab needs the page shell around it');
  return place;
}
