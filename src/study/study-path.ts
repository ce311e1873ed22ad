/** Keys and indices from the top of a study file to a value. */
export type StudyPath = readonly (string | number)[];

/** @returns the path as people write it: `candidates.strings.modules[0][1]` */
export function renderPath(path: StudyPath): string {
  let text = '';
  for (const step of path) {
    if (typeof step === 'number') text += `[${step}]`;
    else text += text === '' ? step : `.${step}`;
  }
  return text;
}

/** @returns true if `path` is `start` or lies inside it */
export function isWithin(path: StudyPath, start: StudyPath): boolean {
  return start.every((step, index) => path[index] === step);
}

/** @returns the value at a path of plain data, undefined if there is none */
export function valueAt(data: unknown, path: StudyPath): unknown {
  let value = data;
  for (const step of path) {
    if (typeof value !== 'object' || value === null || !Object.hasOwn(value, step)) return undefined;
    value = (value as Record<string | number, unknown>)[step];
  }
  return value;
}
