import { z } from 'zod';

/**
 * What a value of a contract is refused with where the contract has no words of its own: one sentence that says what to
 * give instead. Whoever parses contracts imports this once; a sentence written at a field goes before these.
 */
export const plainWords: z.core.$ZodErrorMap = (issue) => {
  switch (issue.code) {
    case 'too_big':
      if (issue.origin === 'string') return `Keep this to ${issue.maximum} characters.`;
      if (issue.origin === 'array') return `At most ${issue.maximum} of these.`;
      return issue.inclusive ? `Must be ${issue.maximum} or less.` : `Must be below ${issue.maximum}.`;
    case 'too_small':
      if (issue.origin === 'string') {
        return Number(issue.minimum) === 1 ? 'Fill this in.' : `Give at least ${issue.minimum} characters.`;
      }
      if (issue.origin === 'array') return `Give at least ${issue.minimum} of these.`;
      return issue.inclusive ? `Must be ${issue.minimum} or more.` : `Must be above ${issue.minimum}.`;
    case 'invalid_type':
      if (issue.input === undefined) return 'This is missing.';
      if (issue.expected === 'int') return 'Give a whole number.';
      if (issue.expected === 'number') return 'Give a number.';
      if (issue.expected === 'string') return 'Give this as text.';
      if (issue.expected === 'boolean') return 'Give true or false.';
      if (issue.expected === 'array') return 'Give a list.';
      return issue.expected === 'object' ? 'Give an object with its fields.' : undefined;
    case 'invalid_value':
      return `Give one of: ${issue.values.map(String).join(', ')}.`;
    default:
      return undefined;
  }
};

z.config({ customError: plainWords });
