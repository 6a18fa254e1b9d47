import { Config } from '../platform/config';
import { Compute } from '../platform/compute';
import { Passwords } from './passwords';

describe('Passwords', () => {
  const passwords = new Passwords(new Config({ NODE_ENV: 'test' }), new Compute(new Config({})));
  const about = { name: 'Tamsin Oake', email: 'tamsin.oake@corriebank.example' };

  // NIST SP 800-63B, 5.1.1.2: no rules of composition; common, repetitive, sequential and context-specific values are refused.
  it.each(['nine quiet pebbles', 'correcthorsebatterystaple', 'slow river over stones', '8271 0493 5526', 'ÄÖÜ über die Brücke'])('takes %s', (password) => {
    expect(() => passwords.check(password, about, 'password')).not.toThrow();
  });

  it.each([
    ['a common word with digits', 'Password12345'],
    ['a common word twice', 'dragondragon'],
    ['a few characters over and over', 'abababababab'],
    ['a plain sequence', '1234567890123'],
    ['letters in order', 'abcdefghijklmnop'],
    ['their own name', 'tamsinoake123'],
    ['the program’s name', 'strainwright1'],
    ['more bytes than bcrypt reads', 'äöüß'.repeat(5) + 'éèêëïîôûçñåæøłžőűš'],
  ])('refuses %s', (_what, password) => {
    expect(() => passwords.check(password, about, 'newPassword')).toThrow(expect.objectContaining({ status: 422, errors: [expect.objectContaining({ path: 'newPassword' })] }));
  });

  it('hashes with cost 12 outside tests', () => {
    expect(new Config({}).passwordCost).toBe(12);
  });
});
