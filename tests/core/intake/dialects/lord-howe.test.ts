import { readsEveryDialect } from './suite';

readsEveryDialect('Australia/Lord_Howe', ['Australia/Lord_Howe', 'UTC']);
