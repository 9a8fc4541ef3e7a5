/** Rates at which cameras record and files play [Hz] (common practice of the trade; 30 stands for 29.97 as well). */
export const commonRatesHz: readonly number[] = [
  15, 24, 25, 30, 48, 50, 60, 90, 100, 120, 125, 150, 180, 200, 240, 250, 300, 400, 420, 480, 500, 600, 720,
  800, 900, 960, 1000, 1200, 1500, 1920, 2000, 2400, 2500, 3000, 4000, 5000, 6000, 7500, 8000, 10_000, 12_000,
  15_000, 20_000, 25_000, 30_000, 40_000, 50_000, 60_000, 100_000,
];
