import { applyTheme, storedTheme } from './theme.ts';

applyTheme(storedTheme());
