import { describe, expect, it } from 'vitest';
import { hashPassword, verifyPassword, weaknessOf } from './passwords';

const person = { email: 'warden.of.reeds@quillmere.example', name: 'Warden of the Reeds' };

describe('a password', () => {
  it.each(['reed and water and wind', 'ÄÖÜ-äöü-ÄÖÜ-äöü', '🦡🦡🦡 badger 🦡 sett', 'x7!Kq'.repeat(30)])(
    'may be %s',
    (password) => {
      expect(weaknessOf(password, person)).toBeNull();
    }
  );

  it.each([
    ['short', /at least 12/],
    ['🦡🦡🦡🦡🦡🦡', /at least 12/],
    ['x'.repeat(201), /at most 200/],
    ['Warden.of.Reeds@quillmere.example', /e-mail address/],
    ['warden of the reeds', /your name/],
    ['Password1234', /first that anybody would try/],
    ['aaaaaaaaaaaaaa', /first that anybody would try/]
  ])('may not be %s', (password, why) => {
    expect(weaknessOf(password, person)).toMatch(why);
  });

  it('is kept as argon2id and known again', async () => {
    const stored = await hashPassword('reed and water and wind');
    expect(stored).toMatch(/^\$argon2id\$v=19\$m=19456,t=2,p=1\$/);
    expect(await verifyPassword(stored, 'reed and water and wind')).toBe(true);
    expect(await verifyPassword(stored, 'reed and water and Wind')).toBe(false);
  });

  it('of nobody is never right, not even the one behind the decoy', async () => {
    expect(await verifyPassword(null, 'no one has this password')).toBe(false);
  });
});
