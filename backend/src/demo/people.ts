/** People of the demo; everybody is invented. */
import type { INestApplicationContext } from '@nestjs/common';
import type { Role } from '@strainwright/common/contract/vocabulary';
import { CustomersService } from '../customers/customers.service';
import { Database } from '../database/database';
import { people } from '../database/schema/people';
import { LaboratoryService } from '../laboratory/laboratory.service';
import { PeopleService } from '../people/people.service';
import { Clock } from '../platform/clock';
import { newId } from '../platform/ids';
import { RecordService } from '../record/record.service';
import type { Caller } from '../session/caller';
import { Passwords } from '../session/passwords';

/** The same for everyone, because everything here is for show. */
export const DEMO_PASSWORD = 'nine quiet pebbles';

const STAFF = [
  { key: 'administrator', name: 'Piers Lund', email: 'admin@corriebank.example', role: 'administrator' },
  { key: 'technician', name: 'Tamsin Oake', email: 'technician@corriebank.example', role: 'technician' },
  { key: 'analyst', name: 'Idris Vale', email: 'analyst@corriebank.example', role: 'analyst' },
  { key: 'reviewer', name: 'Maren Holt', email: 'reviewer@corriebank.example', role: 'reviewer' },
  { key: 'quality', name: 'Odile Brandt', email: 'quality@corriebank.example', role: 'quality manager' },
] as const satisfies readonly { key: string; name: string; email: string; role: Role }[];

const CUSTOMERS = [
  { key: 'harbeck', customer: 'Harbeck Crossing Partnership', address: 'Pier Office, Harbeck Quay\nHarbeck', name: 'Nora Quill', email: 'nora@harbeck.example' },
  { key: 'fennick', customer: 'Fennick Rotors', address: 'Unit 9, Tarn Works\nFennick', name: 'Joss Amery', email: 'joss@fennick.example' },
  { key: 'lune', customer: 'Lune Hollow Optics', address: 'The Old Glasshouse\nLune Hollow', name: 'Bettina Sorrel', email: 'bettina@lunehollow.example' },
] as const;

export type CastKey = (typeof STAFF)[number]['key'] | (typeof CUSTOMERS)[number]['key'];
export type Cast = Readonly<Record<CastKey, Caller>>;

export const DEMO_SIGN_INS: readonly { who: string; email: string; password: string }[] = [
  ...STAFF.map(({ role, email }) => ({ who: role, email, password: DEMO_PASSWORD })),
  ...CUSTOMERS.map(({ customer, email }) => ({ who: `customer, ${customer}`, email, password: DEMO_PASSWORD })),
];

/** Makes the administrator, who then makes everybody else and names the laboratory. */
export async function makeCast(app: INestApplicationContext): Promise<Cast> {
  const members = new Map<CastKey, Caller>();
  const administrator = await makeAdministrator(app);
  members.set('administrator', administrator);
  const lab = app.get(LaboratoryService);
  const { version } = await lab.read();
  await lab.change(administrator, { name: 'Corrie Bank Materials Laboratory', address: '4 Kiln Row, Corrie Bank', timeZone: 'Europe/London', separationOfDuties: true, version });
  const service = app.get(PeopleService, { strict: false });
  for (const { key, name, email, role } of STAFF.slice(1)) {
    const { id } = await service.create(administrator, { name, email, roles: [role], customerId: null, password: DEMO_PASSWORD });
    members.set(key, callerOf(id, name, email, role, null));
  }
  for (const { key, customer, address, name, email } of CUSTOMERS) {
    const { id: customerId } = await app.get(CustomersService, { strict: false }).add({ name: customer, address, contactEmail: email }, administrator);
    const { id } = await service.create(administrator, { name, email, roles: ['customer'], customerId, password: DEMO_PASSWORD });
    members.set(key, callerOf(id, name, email, 'customer', customerId));
  }
  return castOf(members);
}

async function makeAdministrator(app: INestApplicationContext): Promise<Caller> {
  const { name, email, role } = STAFF[0];
  const row = { id: newId(), name, email, roles: [role], passwordHash: await app.get(Passwords).hash(DEMO_PASSWORD), createdAt: app.get(Clock).now() };
  await app.get(Database).transaction(async (tx) => {
    await tx.insert(people).values(row);
    await app.get(RecordService).append(tx, { action: 'person.added', noun: 'person', nounId: row.id, person: null, details: { name, email, roles: [role], reason: 'demo' } });
  });
  return callerOf(row.id, name, email, role, null);
}

function callerOf(id: string, name: string, email: string, role: Role, customerId: string | null): Caller {
  return { id, name, email, roles: [role], customerId, familyId: newId() };
}

function castOf(members: ReadonlyMap<CastKey, Caller>): Cast {
  const member = (key: CastKey): Caller => {
    const found = members.get(key);
    if (found === undefined) throw new Error(`The demo has no ${key}`);
    return found;
  };
  return {
    administrator: member('administrator'), technician: member('technician'), analyst: member('analyst'), reviewer: member('reviewer'), quality: member('quality'),
    harbeck: member('harbeck'), fennick: member('fennick'), lune: member('lune'),
  };
}
