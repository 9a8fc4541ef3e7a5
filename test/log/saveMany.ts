import { openLog } from '../../main/log/openLog.ts';
import { reductionExample } from './reductionExample.ts';

// A process of its own that saves reductions: saveMany.ts LOG NAME HOW_MANY
const [path, name, howMany] = process.argv.slice(2);
const log = await openLog(path as string);
for (let n = 0; n < Number(howMany); n++) await log.save(reductionExample({}, `/${name}/${n}.mp4`));
await log.close();
