// What: lets a screen test say `expect(await axe(container)).toHaveNoViolations()`, and gives it the time that axe and
// typing need on two busy cores (5 s were not enough while a browser ran beside).
import { toHaveNoViolations } from 'jest-axe';

expect.extend(toHaveNoViolations);

jest.setTimeout(30_000);
