import { readsEveryDialect } from './suite';

readsEveryDialect('UTC', ['UTC', 'Europe/Lisbon']);
