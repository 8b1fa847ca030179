import { writeFileSync } from 'node:fs';
import { scheduleJsonSchema } from '@/core/tariff';

// `npm run schema`: writes the JSON Schema that editors use beside the schedule files.
writeFileSync('tariffs/schedule.schema.json', `${JSON.stringify(scheduleJsonSchema(), null, 1)}\n`);
