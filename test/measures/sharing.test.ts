import { describe, expect, it } from 'vitest';
import { sharingMeasures } from '../../src/measures/sharing.js';
import { SHARED } from './shared-facts.js';

describe('measures of sharing', () => {
  it('compare the most loaded module with an equal share', () => {
    // By hand: 60 of 50 A, 22 of 20 A; 10 Ah in ten days; 1200 over 1000.
    const of = sharingMeasures(SHARED);
    expect([of.sharing_peak, of.sharing_rms, of.peak_module_current]).toEqual([1.2, 1.1, 60]);
    expect([of.circulating_charge, of.throughput_spread]).toEqual([1, 1.2]);
  });

  it('take 50 mV at joining for allowed and more for too much', () => {
    const past = (joiningV: number) => sharingMeasures({ ...SHARED, joiningV }).joining_voltage_past_limit;
    expect([past(0.05), past(0.0501)]).toEqual([0, 1]);
    expect(sharingMeasures(SHARED)).toMatchObject({ joining_voltage: 50, joining_current: 3.85 });
  });

  it('are absent where there is one string, no link, no rating, no open path, no current', () => {
    expect(sharingMeasures(SHARED)).toMatchObject({
      peak_module_current_of_rating: null,
      above_continuous_rating: null,
      peak_string_current_of_lead_rating: null,
      peak_string_current_of_fuse_rating: null,
      link_current_peak: null,
      link_current_rms: null,
      link_current_peak_of_rating: null,
      blocking_voltage: null,
      blocking_voltage_of_rating: null,
    });
    const alone = sharingMeasures({ ...SHARED, strings: 1, joiningV: null, joiningA: null, circulatingAs: null });
    expect([alone.sharing_peak, alone.sharing_rms, alone.throughput_spread, alone.joining_voltage_past_limit]).toEqual([
      null,
      null,
      null,
      null,
    ]);
    const idle = sharingMeasures({ ...SHARED, peakBankA: 0, rmsBankA: 0, leastThroughputAs: 0 });
    expect([idle.sharing_peak, idle.sharing_rms, idle.throughput_spread]).toEqual([null, null, null]);
  });

  it('compare with ratings in percent', () => {
    // By hand: 60 of 240 A, 60 of 120 A, 8 of 32 A, 1.5 h.
    const rated = {
      peakOfRating: 0.3,
      aboveContinuousS: 5400,
      peakLinkA: 8,
      leadRatingA: 240,
      fuseRatingA: 120,
      linkRatingA: 32,
    };
    expect(sharingMeasures({ ...SHARED, ...rated, blockingV: 30, blockingOfRating: 0.5 })).toMatchObject({
      peak_module_current_of_rating: 30,
      above_continuous_rating: 1.5,
      peak_string_current_of_lead_rating: 25,
      peak_string_current_of_fuse_rating: 50,
      link_current_peak_of_rating: 25,
      blocking_voltage: 30,
      blocking_voltage_of_rating: 50,
    });
  });
});
