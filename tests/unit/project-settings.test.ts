import { readProjectSettings, reportCodes } from '@visviva/shared';
import { Ajv } from 'ajv';
import { describe, expect, it } from 'vitest';
import schema from '../../media/visviva.schema.json';

const isValid = new Ajv({ strict: false }).compile(schema);

describe('project settings', () => {
  it.each<[unknown, string | undefined]>([
    [{}, undefined],
    [{ $schema: 'x', include: ['src/'], exclude: ['*.gen.ts'], timeLimit: 500, severity: { unused: 'note' }, python: 2 }, undefined],
    [{ requireClaims: true, allowUnread: false, maxFindings: 3, baseline: 'b.json' }, undefined],
    [[], 'must be an object'],
    [{ includes: [] }, 'there is no setting "includes"; the settings are include, exclude'],
    [{ include: 'src' }, '"include" must be a list of patterns'],
    [{ include: [''] }, '"include" must be a list'],
    [{ timeLimit: 10 }, '"timeLimit" must be a whole number of milliseconds from 50'],
    [{ timeLimit: 99.5 }, '"timeLimit" must be'],
    [{ severity: { sing: 'note' } }, '"severity" knows no code "sing"'],
    [{ severity: { sign: 'off' } }, 'gives "sign" the severity "off"'],
    [{ severity: [] }, '"severity" must give codes'],
    [{ python: 4 }, '"python" must be 2 or 3'],
    [{ allowUnread: 'yes' }, '"allowUnread" must be true or false'],
    [{ maxFindings: -1 }, '"maxFindings" must be a whole number'],
    [{ baseline: '' }, '"baseline" must be the name of a file'],
  ])('%j', (value, fault) => {
    const { faults, settings } = readProjectSettings(value);
    expect(isValid(value)).toBe(fault === undefined);
    if (fault === undefined) {
      expect(faults).toEqual([]);
      expect({ ...(value as object), ...settings }).toEqual(value);
    } else expect(faults[0]).toContain(fault);
  });

  it('knows every code of a report', () => {
    expect(Object.keys(schema.properties.severity.properties).sort()).toEqual([...reportCodes].sort());
  });
});
