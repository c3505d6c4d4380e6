import { beginWorkPhoto } from '../../src/server/commands/begin-work-photo.ts';
import { who } from './people.ts';
import { inALane, sendPicture } from './photos.ts';
import type { Timeline } from './timeline.ts';
import { drawWork, type WorkPicture } from './work-pictures.ts';

type Shown = readonly [what: WorkPicture, species: string, caption: string];

/** What some sawyers show of jobs before Skidway, by their key. */
const shown: Readonly<Record<string, readonly Shown[]>> = {
  bram: [
    ['stack', 'black-walnut', 'Yard walnut, 4/4, stickered and under tin the same evening'],
    ['mill', 'white-oak', 'The wide band halfway down a white oak'],
  ],
  lark: [['mill', 'red-pine', 'Squaring a red pine for a barn post'], ['stack', 'eastern-white-pine', 'Siding for one gable, sorted by width']],
  pim: [['slab', 'black-cherry', 'Cherry crotch, 9 ft, flattened after two summers']],
};

/** The evening after all sawyers have set up: a few show their work. */
export function tellWork(timeline: Timeline): void {
  for (const [key, pictures] of Object.entries(shown)) {
    timeline.add(-75, '20:00', async (at) => inALane(async () => {
      const by = await who(key);
      for (const [index, [what, species, caption]] of pictures.entries()) {
        const bytes = await drawWork(what, species, 9 + index * 3 + key.length);
        const fileName = `${what}.jpg`;
        await sendPicture(by, await beginWorkPhoto(by, { fileName, type: 'image/jpeg', bytes: bytes.length, caption }, at), fileName, bytes, at);
      }
    }));
  }
}
