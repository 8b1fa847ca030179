import { describe, expect, it } from 'vitest';
import { Practice } from '@/server/models/Practice';
import { foundPractice } from '@/server/services/first-run';
import { checkSignIn } from '@/server/services/sign-in';

const practice = { name: 'Calder & Vane', legalName: 'Calder & Vane LLP', phone: '', currency: 'USD' };
const partner = { name: 'Ilse Aldaran', email: 'ilse@practice.example', password: 'a password of enough length' };

describe('foundPractice', () => {
  it('makes the practice and its first partner, who can sign in', async () => {
    const actor = await foundPractice({ practice, partner });
    expect(actor).toMatchObject({ role: 'partner', email: partner.email, clientId: null });
    expect(await checkSignIn(partner.email, partner.password)).toMatchObject({ user: { id: actor.id } });
  });

  it('refuses a second practice, and changes nothing', async () => {
    const second = { practice: { ...practice, name: 'Another' }, partner: { name: 'N', email: 'n@another.example' } };
    await expect(foundPractice(second)).rejects.toMatchObject({ status: 409 });
    expect((await Practice.findAll()).map(({ name }) => name)).toEqual(['Calder & Vane']);
  });
});
