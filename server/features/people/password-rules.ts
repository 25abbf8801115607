import { invalidField } from '../../http/problem.ts';
import { commonPasswords } from './common-passwords.ts';

interface Owner {
  email: string;
  name: string;
}

/** Length is the contract's; here only what many people try first is refused. No composition rules. */
export function requireUncommonPassword(password: string, owner: Owner, field = 'password'): void {
  if (isCommon(password)) {
    throw invalidField(field, 'is one of those that are tried first; choose several unrelated words');
  }
  if (isAboutOwner(password, owner)) {
    throw invalidField(
      field,
      'must not be made from the name, the e-mail address or the name of this service',
    );
  }
}

function isCommon(password: string): boolean {
  const plain = password.toLowerCase();
  return (
    commonPasswords.has(plain) || commonPasswords.has(withoutEnds(plain)) || isRepeated(plain) || isRun(plain)
  );
}

/** "password2024!" is "password" for those who guess. */
function withoutEnds(plain: string): string {
  return plain.replace(/^[\d\W_]+|[\d\W_]+$/g, '');
}

function isRepeated(plain: string): boolean {
  return /^(.{1,6}?)\1+$/su.test(plain);
}

const runs = [
  '01234567890123456789',
  'abcdefghijklmnopqrstuvwxyz',
  'qwertyuiopasdfghjklzxcvbnm',
  'qwertzuiopasdfghjklyxcvbnm',
];

function isRun(plain: string): boolean {
  return runs.some((run) => run.includes(plain) || [...run].reverse().join('').includes(plain));
}

const shortestTelling = 4;

function isAboutOwner(password: string, { email, name }: Owner): boolean {
  const rest = [...email.split(/[@.]/), ...name.split(/\s+/), 'recalesce']
    .map((word) => word.toLowerCase())
    .filter((word) => word.length >= shortestTelling)
    .reduce((text, word) => text.replaceAll(word, ''), password.toLowerCase());
  return rest.length < password.length && rest.replace(/[\d\W_]/g, '').length < shortestTelling;
}
