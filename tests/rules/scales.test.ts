// Scoring beside the published cases: the bound of a site, and what a scale does not have.

import { changeOf, scoreScale } from '@/shared/rules/scales';

describe('changeOf', () => {
  it('takes the site’s own bound before the shipped one', () => {
    expect(changeOf('PHQ-9', 12, 15, 3).worseBoundReached).toBe(true);
    expect(changeOf('PHQ-9', 12, 15).worseBoundReached).toBe(false);
  });

  it('says nothing of a bound or an important change where the scale has none', () => {
    expect(changeOf('PGIC', 4, 2)).toEqual({ points: -2, percent: -50 });
  });
});

describe('scoreScale', () => {
  it('has no algorithm without item 1 or 2, nor with one symptom', () => {
    expect(scoreScale('PHQ-9', [3, 0, 0, 0, 0, 0, 0, 0, 0])).toMatchObject({ algorithm: 'none' });
    expect(scoreScale('PHQ-9', [0, 0, 3, 3, 0, 0, 0, 0, 0])).toMatchObject({ algorithm: 'none' });
  });

  it('refuses half points and answers below the scale', () => {
    expect(scoreScale('GAD-7', [0, 0, 0, 0, 0, 0, 1.5])).toEqual({ error: 'out_of_range' });
    expect(scoreScale('PHQ-2', [-1, 0])).toEqual({ error: 'out_of_range' });
  });
});
