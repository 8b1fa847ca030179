import { InstanceError, type Model } from 'sequelize';
import { notFound } from '../errors';
import { currentTransaction } from './connection';

/**
 * Reads a row again inside the transaction that is to change it. Its version is then the one that stands: of two people
 * who save in the same moment the second is told of the first, with both values.
 *
 * @throws {ServiceError} 404 where the row was removed meanwhile
 */
export async function freshen<Row extends Model>(row: Row): Promise<Row> {
  if (!currentTransaction()) throw new Error('A row is read again inside the transaction that changes it.');
  try {
    return await row.reload();
  } catch (error) {
    if (error instanceof InstanceError) throw notFound();
    throw error;
  }
}
