import { readsEveryDialect } from './suite';

readsEveryDialect('UTC', ['UTC', 'America/Chicago']);
