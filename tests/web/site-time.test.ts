import { afterEach, describe, expect, it, vi } from 'vitest';
import { dayFrom, instantOf, siteDate, siteTime } from '../../src/web/site-time.js';

// Clock changes of Europe/Dublin 2026: 29 March 01:00 and 25 October 01:00 UTC (IANA time zone database, through luxon).
describe("the site's clock", () => {
  const zone = 'Europe/Dublin';
  afterEach(() => void vi.useRealTimers());

  it.each(['2026-07-01T12:00:00Z', '2026-12-01T12:00:00Z'])(
    'takes the first of the two half past ones, asked on %s',
    (asked) => {
      vi.useFakeTimers({ now: Date.parse(asked), toFake: ['Date'] });
      expect(instantOf('2026-10-25', 90, zone)).toBe(Date.UTC(2026, 9, 25, 0, 30));
      expect(instantOf('2026-10-25', 540, zone)).toBe(Date.UTC(2026, 9, 25, 9, 0));
      // Half past one is not there on the last Sunday of March: the clock shows half past two then.
      expect(instantOf('2027-03-28', 90, zone)).toBe(Date.UTC(2027, 2, 28, 1, 30));
      expect(instantOf('2027-03-28', 540, zone)).toBe(Date.UTC(2027, 2, 28, 8, 0));
    },
  );

  it('tells the two half past ones of an October night apart', () => {
    const first = siteTime(Date.UTC(2026, 9, 25, 0, 30), zone);
    const second = siteTime(Date.UTC(2026, 9, 25, 1, 30), zone);
    expect(first).toBe('2026-10-25 01:30 +01:00');
    expect(second).toBe('2026-10-25 01:30 +00:00');
  });
  it('leaves out the hour that a March night skips', () => {
    expect(siteTime(Date.UTC(2026, 2, 29, 0, 59), zone)).toContain('00:59');
    expect(siteTime(Date.UTC(2026, 2, 29, 1, 0), zone)).toContain('02:00');
  });
  it("changes the date at the site's midnight, not at Greenwich's", () => {
    expect(siteDate(Date.UTC(2026, 6, 1, 22, 59), zone)).toBe('2026-07-01');
    expect(siteDate(Date.UTC(2026, 6, 1, 23, 0), zone)).toBe('2026-07-02');
  });
  it('counts days by the calendar across a change, a leap day and a year', () => {
    expect(dayFrom('2026-10-24', 2)).toBe('2026-10-26');
    expect(dayFrom('2028-02-28', 1)).toBe('2028-02-29');
    expect(dayFrom('2026-12-31', 1)).toBe('2027-01-01');
    expect(dayFrom('2026-03-29', -1)).toBe('2026-03-28');
  });
});
