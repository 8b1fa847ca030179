import { readsEveryDialect } from './suite';

readsEveryDialect('America/Chicago', ['America/Chicago', 'UTC']);
