import { expect, test } from 'vitest';
import { composeModule } from '../../src/sampling/compose-module.js';
import { type PerQuantity, perQuantity, QUANTITY_ORDER } from '../../src/sampling/quantity-order.js';
import { QUANTITIES } from '../../src/study/quantities.js';
import { inventedStock, relativeSpread, stockWith } from './invented-study.js';

const none: PerQuantity<number> = perQuantity(() => 0);

test('the order of draws is that of the registry', () => {
  expect(QUANTITY_ORDER).toEqual(QUANTITIES.map(({ name }) => name));
});

test('deviations add up over the levels: relative ones to a factor, absolute ones to the value', () => {
  const shared = { ...none, capacityAh: 0.02, arrivalCharge: 0.04, overVoltageV: -0.01, standbyA: 0.5 };
  const module = composeModule(inventedStock(), 'N1', shared, [
    { ...none, capacityAh: 0.01, arrivalCharge: -0.01 },
    { ...none, capacityAh: -0.03 },
  ]);
  // By hand: 100 (1 + 0.02 + 0.01); 0.5 + 0.04 - 0.01; 3.65 - 0.01; 0.008 x 1.5.
  expect(module.capacityAh).toEqual([expect.closeTo(103, 10), expect.closeTo(99, 10)]);
  expect(module.arrivalCharge).toEqual([expect.closeTo(0.53, 12), expect.closeTo(0.54, 12)]);
  expect(module.overVoltageV).toBeCloseTo(3.64, 12);
  expect(module.standbyA).toBeCloseTo(0.012, 12);
});

test("a cell leaks its rate of its own capacity, and its polarisation scales with its resistance's deviation", () => {
  const { leakageA, polarisation } = composeModule(inventedStock(), 'N1', { ...none, resistanceOhm: 0.25 }, [
    { ...none, capacityAh: 0.2, leakagePerMonth: 0.5 },
    { ...none, resistanceOhm: 0.25 },
  ]);
  // By hand: 0.0045 x 120 Ah / 720 h = 0.75 mA; 0.003 x 100 / 720 = 0.41667 mA; factors 1.25 and 1.5.
  expect(leakageA).toEqual([expect.closeTo(0.00075, 12), expect.closeTo(0.3 / 720, 12)]);
  expect(polarisation).toEqual([
    { timeConstantS: 60, resistanceOhm: [expect.closeTo(0.0005, 12), expect.closeTo(0.0006, 12)] },
    { timeConstantS: 1800, resistanceOhm: [expect.closeTo(0.00075, 12), expect.closeTo(0.0009, 12)] },
  ]);
});

test('an absolute deviation of the resistance scales the polarisation too', () => {
  const stock = stockWith({ resistanceOhm: { ...relativeSpread(0.0008), relative: false } });
  const { polarisation } = composeModule(stock, 'N1', { ...none, resistanceOhm: 0.0004 }, [none]);
  expect(polarisation[0]?.resistanceOhm).toEqual([expect.closeTo(0.0006, 12)]);
});

test('cells without series resistance keep their polarisation', () => {
  const stock = stockWith({ resistanceOhm: relativeSpread(0) });
  const { polarisation, resistanceOhm } = composeModule(stock, 'N1', none, [none]);
  expect(resistanceOhm).toEqual([0]);
  expect(polarisation.map((pair) => pair.resistanceOhm)).toEqual([[0.0004], [0.0006]]);
});

test('path and joints lie in series, and what has no spread comes from the stock', () => {
  const stock = inventedStock();
  const module = composeModule(stock, 'N1', { ...none, pathResistanceOhm: 0.2, jointResistanceOhm: -0.1 }, [none]);
  // By hand: 1.5 x 1.2 + 1.3 x 0.9 = 2.97 mOhm.
  expect(module.pathResistanceOhm).toBeCloseTo(0.00297, 12);
  expect(module).toMatchObject({
    id: 'N1',
    stock: 'newer',
    ratedAh: 100,
    ocv: 0,
    hysteresisV: 0.0075,
    hysteresisRate: 60,
    bms: stock.bms,
  });
});
