import { describe, expect, it } from 'vitest';
import { actAs } from '@/server/db/context';
import { inTx } from '@/server/db/tx';
import { Client } from '@/server/models/Client';
import { Trail } from '@/server/models/Trail';
import { User } from '@/server/models/User';
import { buildClient, buildUser } from '../setup/build';

describe('trail', () => {
  it('refuses a write outside inTx', async () => {
    await expect(Client.create({ name: 'Outside', city: null, contact: null, currency: 'USD' })).rejects.toThrow(
      'outside inTx',
    );
  });

  it('tells who changed what, before and after', async () => {
    const client = await buildClient({ name: 'Before' });
    const user = await buildUser();
    await actAs({ actorId: user.id, ip: '192.0.2.7' }, () => inTx(() => client.update({ name: 'After' })));
    const row = await Trail.findOne({ where: { subject: 'Client', subjectId: client.id, action: 'update' } });
    expect(row).toMatchObject({ actorId: user.id, ip: '192.0.2.7' });
    expect(row?.before).toMatchObject({ name: 'Before' });
    expect(row?.after).toMatchObject({ name: 'After' });
  });

  it('leaves a row for each of many changed at once', async () => {
    await buildClient({ name: 'Twin' });
    await buildClient({ name: 'Twin' });
    await inTx(() => Client.update({ city: 'Here' }, { where: { name: 'Twin' } }));
    const rows = await Trail.findAll({ where: { subject: 'Client', action: 'update' } });
    expect(rows.filter((row) => row.after?.city === 'Here')).toHaveLength(2);
  });

  it('never shows a password hash', async () => {
    const user = await buildUser({ passwordHash: 'secret-hash' });
    await inTx(() => user.update({ passwordHash: 'another-hash' }));
    const rows = await Trail.findAll({ where: { subject: 'User', subjectId: user.id } });
    expect(rows.length).toBe(2);
    expect(JSON.stringify(rows)).not.toMatch(/secret-hash|another-hash/);
  });

  it('rolls back with the work it belongs to', async () => {
    const before = await Trail.count();
    await expect(
      inTx(async () => {
        await Client.create({ name: 'Never', city: null, contact: null, currency: 'USD' });
        throw new Error('stop');
      }),
    ).rejects.toThrow('stop');
    expect(await Trail.count()).toBe(before);
    expect(await Client.findOne({ where: { name: 'Never' } })).toBeNull();
  });

  it('keeps a client away from staff columns by a database check', async () => {
    await expect(
      inTx(() =>
        User.create({
          email: 'nobody@client.example',
          name: 'N',
          role: 'client',
          clientId: null,
          passwordHash: null,
          rights: { view: true, record: false, decide: false, pay: false },
          licenceJurisdiction: null,
          licenceNumber: null,
          licenceExpires: null,
          licenceCheckedById: null,
          disabledAt: null,
        }),
      ),
    ).rejects.toThrow();
  });
});
