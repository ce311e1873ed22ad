import type { OracleParameters } from '../reference/oracle/oracle-parameters.js';

/**
 * An outside bank written down as a study file, module by module and cell by cell, with everything left out that the
 * outside circuit has not: delays, drops, bleed, standby, hysteresis.
 */
export function oracleStudyText(parameters: OracleParameters): string {
  const { ocv, bms, modules, resistors, sources, t_end } = parameters;
  const mOhm = (id: string): number => 1000 * (resistors.find((resistor) => resistor.id === id)?.ohm ?? 0);
  const linked = resistors.some(({ id }) => id === 'rx');
  const leads = [1, 2].map(
    (s) => `{negative: ${mOhm(`rs${s}bot`)}, between: ${mOhm(`rs${s}mid`)}, positive: ${mOhm(`rs${s}top`)}}`,
  );
  const list = (values: readonly number[]): string => `[${values.join(', ')}]`;
  const charger = sources.find(({ kind }) => kind === 'cccv');
  return `motleybank: 1
title: Outside bank ${parameters.case}
seed: 0
instances: 1
cycles: 1
ocv:
  outside:
    interpolation: linear
    charge_fraction: ${list(ocv.z)}
    V: ${list(ocv.U)}
stock:
  outside:
    defaults:
      cells_in_series: 4
      rated_Ah: 100
      ocv: outside
      hysteresis_mV: 0
      coulombic_efficiency: 1
      standby_mA: 0
      joint_resistance_mOhm: 0
      bms:
        over_voltage: {cell_V: ${bms.ov_trip}, release_V: ${bms.ov_release}, delay_s: 0, release_hold_s: 0}
        under_voltage: {cell_V: ${bms.uv_trip}, release_V: ${bms.uv_release}, delay_s: 0, release_hold_s: 0, release_on_charge: false}
        over_current: {charge_A: 1000, discharge_A: 1000}
        bleed: {rule: none}
        forward_drop_V: 0
        reclose_A: null
    modules:
${modules
  .map(
    ({ id, Rp, cells }) => `      ${id}:
        path_resistance_mOhm: ${1000 * Rp}
        capacity_Ah: ${list(cells.map(({ Q_Ah }) => Q_Ah))}
        cell_resistance_mOhm: ${list(cells.map(({ R0 }) => 1000 * R0))}
        polarisation: [{mOhm: ${list(cells.map(({ R1 }) => 1000 * R1))}, tau_s: ${cells[0].R1 * cells[0].C1}}]
        leakage_mA: ${list(cells.map(({ i_sd }) => 1000 * i_sd))}
        arrival_charge_percent: ${list(cells.map(({ z0 }) => 100 * z0))}`,
  )
  .join('\n')}
duty:
  phases:
${phases(sources, t_end)}
candidates:
  bank:
    wiring: ${linked ? 'cross-linked' : 'strings'}
    modules: [[m1, m2], [m3, m4]]
    string_lead_mOhm: [${leads.join(', ')}]
${linked ? `    link_mOhm: ${mOhm('rx')}\n` : ''}    charger: {limit_A: ${charger?.I ?? 40}, absorption_V: ${charger?.V ?? 28.8}, until: {tail_A: 0, or_after_h: null}, float_V: null}
    load: {disconnect_V: null}
`;
}

/** One phase for each source in order, with the rests between them. */
function phases(sources: OracleParameters['sources'], endS: number): string {
  const lines: string[] = [];
  let timeS = 0;
  const rest = (untilS: number): void => {
    if (untilS > timeS) lines.push(`    - {rest_h: ${(untilS - timeS) / 3600}}`);
    timeS = Math.max(timeS, untilS);
  };
  for (const source of [...sources].sort((a, b) => a.t_on - b.t_on)) {
    rest(source.t_on);
    const hours = ((source.t_off ?? endS) - source.t_on) / 3600;
    lines.push(
      source.kind === 'cccv' ? `    - {charge_for_h: ${hours}}` : `    - {discharge_A: ${source.I}, for_h: ${hours}}`,
    );
    timeS = source.t_off ?? endS;
  }
  rest(endS);
  return lines.join('\n');
}
