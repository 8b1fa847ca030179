import { Readable } from 'node:stream';
import { storePages } from '../../../src/server/page-stream';
import type { Actor } from '../../../src/server/policies/actor';
import { attachPages } from '../../../src/server/services/attachments';
import { listBills } from '../../../src/server/services/bills';
import type { OpenEngagement } from '../../../src/server/services/engagements';
import { meterPhoto } from './meter-photo';
import { statementPdf } from './statement';

/** The bill of June as the client mailed it: the utility's statement and a photo of the meter on the day it was read. */
export async function attachJuneBill(consultant: Actor, opened: OpenEngagement): Promise<void> {
  const bill = (await listBills(opened.engagement.id)).find(({ to }) => to === '2026-06-30');
  if (!bill) throw new Error('The demo scenario has no bill that ends on 30 June 2026');
  const attach = async (fileName: string, bytes: Buffer, pageCount: number) => {
    const stored = await storePages(Readable.from([bytes]), fileName);
    await attachPages(consultant, opened, { ...stored, fileName, billId: bill.id, pageCount });
  };
  await attach('ov-statement-jun-2026.pdf', await statementPdf(bill), 2);
  await attach('meter-ov5510-274.png', await meterPhoto(bill), 1);
}
