import { z } from 'zod';

/** Names of stocks, tables and candidates: they reach file names, so devices of some system are no names. */
export const NAME = /^(?!(?:con|prn|aux|nul|com[0-9]|lpt[0-9])$)[a-z][a-z0-9-]{0,31}$/;
export const NAME_RULE =
  'a name of at most 32 small letters, digits and hyphens that begins with a letter and is no device (con, nul, ...)';

/** Names of modules. */
export const MODULE_ID = /^[A-Za-z][A-Za-z0-9_-]{0,31}$/;
export const MODULE_ID_RULE =
  'a module name of at most 32 letters, digits, hyphens and underscores that begins with a letter';

export const moduleId = z.string(MODULE_ID_RULE).regex(MODULE_ID, MODULE_ID_RULE);
