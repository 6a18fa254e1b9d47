/** Sessions, people, customers and the laboratory itself. */
import { z } from 'zod';
import { role } from './vocabulary';
import { id, instant, longText, shortText, version } from './wire';

export const email = z.string().trim().toLowerCase().max(254).pipe(z.email('Enter an e-mail address'));
export const decimalStyle = z.enum(['.', ',']);

/** NIST SP 800-63B: length matters, composition does not; common passwords are refused by the server. */
export const newPassword = z.string().min(12, 'At least 12 characters').max(128, 'At most 128 characters');

export const signIn = z.strictObject({ email, password: z.string().min(1, 'Enter the password').max(200) });

export const user = z.object({
  id,
  name: z.string(),
  email: z.string(),
  roles: z.array(role),
  customerId: id.nullable(),
  customerName: z.string().nullable(),
  decimalStyle,
});
export type User = z.infer<typeof user>;

export const sessionAnswer = z.object({ accessToken: z.string(), user });
export const ownSettings = z.strictObject({ decimalStyle });
export const changeOwnPassword = z.strictObject({ password: z.string().min(1).max(200), newPassword });

export const customer = z.object({ id, name: z.string(), address: z.string(), contactEmail: z.string(), version });
export type Customer = z.infer<typeof customer>;
export const newCustomer = z.strictObject({ name: shortText, address: longText.min(1, 'Enter the address'), contactEmail: email });
export const changeCustomer = newCustomer.partial().extend({ version });

export const person = z.object({
  id, name: z.string(), email: z.string(), roles: z.array(role), customerId: id.nullable(), customerName: z.string().nullable(),
  active: z.boolean(), lastSignInAt: instant.nullable(), version,
});
export type Person = z.infer<typeof person>;

const customerOnly = (p: { roles: string[]; customerId: string | null }) => p.roles.includes('customer') === (p.customerId !== null) && !(p.roles.includes('customer') && p.roles.length > 1);
const customerOnlyMessage = { path: ['customerId'], message: 'A customer role needs its customer, and stands alone' };
export const newPerson = z
  .strictObject({ name: shortText, email, roles: z.array(role).min(1, 'Choose at least one role'), customerId: id.nullable(), password: newPassword })
  .refine(customerOnly, customerOnlyMessage);
export const changePerson = z
  .strictObject({ name: shortText, roles: z.array(role).min(1), customerId: id.nullable(), active: z.boolean(), password: newPassword.optional(), version })
  .refine(customerOnly, customerOnlyMessage);

export const laboratory = z.object({ name: z.string(), address: z.string(), timeZone: z.string(), separationOfDuties: z.boolean(), version });
export type Laboratory = z.infer<typeof laboratory>;
export const changeLaboratory = z.strictObject({ name: shortText, address: longText.min(1), timeZone: shortText, separationOfDuties: z.boolean(), version });
