/** Features of a module that are kept beside the measures, in column order. Append only: they are part of what a run leaves. */
export const DRAWN_FEATURES = [
  { name: 'capacity_Ah', unit: 'Ah', definition: 'Capacity of the module: its smallest cell.' },
  { name: 'resistance_mOhm', unit: 'mOhm', definition: 'Series resistance of the module: cells, joints and BMS path.' },
  { name: 'standby_mA', unit: 'mA', definition: 'Standby current of the BMS.' },
  { name: 'leakage_mA', unit: 'mA', definition: 'Mean leakage current of the cells.' },
  { name: 'efficiency', unit: '', definition: 'Mean coulombic efficiency of the cells.' },
  { name: 'arrival_charge_percent', unit: '%', definition: 'Capacity-weighted mean charge of the cells as received.' },
  { name: 'over_voltage_V', unit: 'V', definition: 'Over-voltage threshold.' },
  { name: 'under_voltage_V', unit: 'V', definition: 'Under-voltage threshold.' },
] as const;
