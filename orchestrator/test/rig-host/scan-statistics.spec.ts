import { ScanStatistics } from '../../src/rig-host/scan-statistics.js';

describe('scan statistics', () => {
  it('know the 99th percentile of lateness to a tenth', () => {
    const statistics = new ScanStatistics();
    for (let i = 0; i < 500; i += 1) statistics.add(i % 50 === 0 ? 0.02 : 0.0005, 0.001, 0.01);
    // 10 of 500 are 20 ms: 2 %, so the 99th percentile is among them.
    expect(statistics.latenessP99Ms()).toBeGreaterThanOrEqual(20);
    expect(statistics.latenessP99Ms()).toBeLessThan(22);
    expect(statistics.overruns).toBe(10);
    expect(statistics.wireMeanMs()).toBeCloseTo(1, 9);
  });

  it('are not moved by what is rarer than one in a hundred', () => {
    const statistics = new ScanStatistics();
    for (let i = 0; i < 500; i += 1) statistics.add(i < 4 ? 0.02 : 0.0005, 0.001, 0.1);
    expect(statistics.latenessP99Ms()).toBeLessThan(0.56);
  });

  it('forget what is long past', () => {
    const statistics = new ScanStatistics();
    for (let i = 0; i < 100; i += 1) statistics.add(1, 0.5, 0.01);
    for (let i = 0; i < 2000; i += 1) statistics.add(0.0005, 0.001, 0.01);
    expect(statistics.latenessP99Ms()).toBeLessThan(0.6);
    expect(statistics.wireMeanMs()).toBeCloseTo(1, 9);
    expect(statistics.count).toBe(2100);
    expect(statistics.overruns).toBe(100);
  });
});
