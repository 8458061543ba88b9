// What: lets a screen test say `expect(await axe(container)).toHaveNoViolations()`.
import { toHaveNoViolations } from 'jest-axe';

expect.extend(toHaveNoViolations);
