import { firstPassword, passwordFault } from './passwords';

const EMAIL = 'ines.harbour@house.example';

describe('passwordFault', () => {
  it.each(['password1234', 'Passwordpassword', 'letmeinletmein', '123456789012', '111111111111', 'qwertyqwerty12', 'welcome-2026!', 'abcabcabcabc', 'leanyear2026'])(
    'refuses the common %s',
    (password) => expect(passwordFault(password, EMAIL)).not.toBeNull(),
  );

  it("refuses the person's own e-mail name", () => expect(passwordFault('ines.harbour and more', EMAIL)).toBe('must not hold your e-mail name'));

  it('does not mind one letter of a short e-mail name', () => expect(passwordFault('a tall lighthouse keeper', 'a@house.example')).toBeNull());

  it.each(['another long phrase', 'secretly counting herons', 'Zr7-quartz-lantern'])('takes %s', (password) => expect(passwordFault(password, EMAIL)).toBeNull());

  it('makes first passwords that would do', () => {
    for (let made = 0; made < 200; made += 1) expect(passwordFault(firstPassword(), EMAIL)).toBeNull();
  });
});
