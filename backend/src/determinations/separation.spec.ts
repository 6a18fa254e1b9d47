import { separationProblem } from './separation';

describe('separationProblem', () => {
  const work = { adoptedByIds: ['ada'], composedById: 'bo', submittedById: 'cy' };

  it.each(['ada', 'bo', 'cy'])('keeps %s, who did the work, from reviewing and releasing it', (person) => {
    expect(separationProblem(work, person, 'review', true)).toMatch(/someone else must review/);
    expect(separationProblem(work, person, 'release', true)).toMatch(/someone else must release/);
  });

  it('lets a person who did neither review', () => {
    expect(separationProblem(work, 'dee', 'review', true)).toBeNull();
  });

  it('lets a sole practitioner through once the rule is switched off', () => {
    expect(separationProblem(work, 'cy', 'release', false)).toBeNull();
  });
});
