import { readsEveryDialect } from './suite';

readsEveryDialect('Asia/Kolkata', ['Asia/Kolkata', 'Australia/Lord_Howe']);
