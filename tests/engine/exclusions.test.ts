import { describe, expect, it } from 'vitest';
import { applyExclusions } from '../../server/engine/exclusions.ts';

const frequencyHz = Float64Array.from({ length: 11 }, (_, i) => 100 + i);
const spur = { hz: 105, fromHz: 104, toHz: 106 };
const leftOutHz = (mask: Uint8Array) => [...frequencyHz].filter((_, i) => mask[i] === 1);

describe('which points stay out of the mean', () => {
  it('leaves the span of a spur out, edges included', () => {
    const { leftOut, exclusions } = applyExclusions(frequencyHz, [spur], []);
    expect(leftOutHz(leftOut)).toEqual([104, 105, 106]);
    expect(exclusions).toEqual([{ fromHz: 104, toHz: 106, kind: 'automatic', active: true }]);
  });

  it('puts a spur’s span back where a person keeps it, with the reason on record', () => {
    const request = { fromHz: 104.5, toHz: 105.5, action: 'keep', reason: 'part of the signal' } as const;
    const { leftOut, exclusions, spanLeftOut } = applyExclusions(frequencyHz, [spur], [request]);
    expect(leftOutHz(leftOut)).toEqual([]);
    expect(spanLeftOut).toEqual([false]);
    expect(exclusions[0]).toMatchObject({ active: false, reason: 'part of the signal' });
  });

  it('takes a person’s span whichever way round it was drawn', () => {
    const { leftOut } = applyExclusions(frequencyHz, [], [{ fromHz: 109, toHz: 107, action: 'exclude' }]);
    expect(leftOutHz(leftOut)).toEqual([107, 108, 109]);
  });

  it('leaves out a point that a person excludes even where the spur around it is kept', () => {
    const { leftOut } = applyExclusions(
      frequencyHz,
      [spur],
      [
        { fromHz: 100, toHz: 110, action: 'keep' },
        { fromHz: 105, toHz: 105, action: 'exclude' },
      ],
    );
    expect(leftOutHz(leftOut)).toEqual([105]);
  });

  it('leaves out what lies outside the band of interest', () => {
    const { leftOut } = applyExclusions(frequencyHz, [], [], { fromHz: 102, toHz: 108 });
    expect(leftOutHz(leftOut)).toEqual([100, 101, 109, 110]);
  });
});
