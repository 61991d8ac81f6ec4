import type { Dialect } from './recording.ts';

/** Tokens that say "no value here", in lower case. */
const MISSING = new Set(['', '-', '--', 'nan', '+nan', '-nan', 'null', 'na', 'n/a', '#n/a', 'none']);
const DECIMAL_NUMBER = /^[+-]?(?:\d+\.?\d*|\.\d+)(?:[eE][+-]?\d+)?$/;
const INFINITE = /^[+-]?inf(?:inity)?$/i;

/** What a token stands for: a finite number, nothing, or something that cannot be read. */
export type Token = number | 'missing' | 'unreadable';

/**
 * Reads one field as a decimal number, blanks around it ignored; `decimal` is the decimal sign.
 * Infinite values, written out or too large for a double, are missing: no sensor measures them.
 */
export function readToken(text: string, decimal: Dialect['decimal']): Token {
  const trimmed = text.trim();
  const plain = decimal === ',' ? trimmed.replace(',', '.') : trimmed;
  if (DECIMAL_NUMBER.test(plain) && !(decimal === ',' && trimmed.includes('.'))) {
    const value = Number(plain);
    return Number.isFinite(value) ? value : 'missing';
  }
  return MISSING.has(trimmed.toLowerCase()) || INFINITE.test(trimmed) ? 'missing' : 'unreadable';
}
