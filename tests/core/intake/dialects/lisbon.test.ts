import { readsEveryDialect } from './suite';

readsEveryDialect('Europe/Lisbon', ['Europe/Lisbon', 'Asia/Kolkata']);
