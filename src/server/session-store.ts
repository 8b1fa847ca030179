import connectSessionSequelize from 'connect-session-sequelize';
import session from 'express-session';
import { sequelize } from './db/connection';
import { Session } from './models/Session';

const shared = globalThis as typeof globalThis & { counterlagSessions?: session.Store };

/** Sessions in the database, one store for the process: it owns a timer that removes the expired ones. */
export function sessionStore(): session.Store {
  if (!shared.counterlagSessions) {
    const Store = connectSessionSequelize(session.Store);
    // Not in the package's types: without it every request of a signed-in person would write to the database.
    const options = { db: sequelize, table: Session.name, disableTouch: true };
    shared.counterlagSessions = new Store(options);
  }
  return shared.counterlagSessions;
}
