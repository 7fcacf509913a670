/**
 * What SARIF requires of everything that the command writes: names, types, limits and which properties must be there.
 * Written from the text of the standard, sections 3.13 to 3.58, since no package of the registry carries its schema; what
 * the command never writes is left out, and is refused here.
 * Source: OASIS, Static Analysis Results Interchange Format (SARIF) Version 2.1.0.
 */
export const sarifSchema = {
  type: 'object',
  required: ['version', 'runs'],
  additionalProperties: false,
  properties: {
    $schema: { type: 'string', format: 'uri' },
    version: { const: '2.1.0' },
    runs: { type: 'array', items: { $ref: '#/$defs/run' } },
  },
  $defs: {
    run: object(['tool'], {
      tool: object(['driver'], {
        driver: object(['name'], {
          name: text(),
          version: text(),
          semanticVersion: text(),
          informationUri: { type: 'string', format: 'uri' },
          rules: list('rule'),
        }),
      }),
      columnKind: { enum: ['utf16CodeUnits', 'unicodeCodePoints'] },
      invocations: { type: 'array', items: object(['executionSuccessful'], { executionSuccessful: { type: 'boolean' }, toolExecutionNotifications: { type: 'array', items: object(['message'], { level: level(), message: ref('message'), locations: list('location') }) } }) },
      results: { type: 'array', items: ref('result') },
    }),
    rule: object(['id'], {
      id: text(),
      name: text(),
      shortDescription: ref('multiformat'),
      fullDescription: ref('multiformat'),
      help: ref('multiformat'),
      defaultConfiguration: object([], { level: level() }),
      properties: bag(),
    }),
    result: object(['message'], {
      ruleId: text(),
      ruleIndex: { type: 'integer', minimum: -1 },
      level: level(),
      message: ref('message'),
      locations: list('location'),
      relatedLocations: list('location'),
      partialFingerprints: { type: 'object', additionalProperties: { type: 'string' } },
      fixes: { type: 'array', uniqueItems: true, items: ref('fix') },
      suppressions: { type: 'array', uniqueItems: true, items: object(['kind'], { kind: { enum: ['inSource', 'external'] }, justification: { type: 'string' } }) },
      properties: bag(),
    }),
    fix: object(['artifactChanges'], {
      description: ref('message'),
      artifactChanges: {
        type: 'array',
        minItems: 1,
        uniqueItems: true,
        items: object(['artifactLocation', 'replacements'], {
          artifactLocation: ref('artifact'),
          replacements: { type: 'array', minItems: 1, items: object(['deletedRegion'], { deletedRegion: ref('region'), insertedContent: object([], { text: { type: 'string' } }) }) },
        }),
      },
    }),
    location: object([], {
      id: { type: 'integer', minimum: -1 },
      message: ref('message'),
      physicalLocation: object(['artifactLocation'], { artifactLocation: ref('artifact'), region: ref('region') }),
      logicalLocations: { type: 'array', uniqueItems: true, items: object([], { name: text(), fullyQualifiedName: text(), kind: text() }) },
    }),
    artifact: object([], { uri: { type: 'string', format: 'uri-reference' }, uriBaseId: text() }),
    region: object([], {
      startLine: { type: 'integer', minimum: 1 },
      startColumn: { type: 'integer', minimum: 1 },
      endLine: { type: 'integer', minimum: 1 },
      endColumn: { type: 'integer', minimum: 1 },
    }),
    message: object(['text'], { text: text(), markdown: text() }),
    multiformat: object(['text'], { text: text(), markdown: text() }),
  },
};

function object(required: string[], properties: Record<string, object>): object {
  return { type: 'object', required, additionalProperties: false, properties };
}

function ref(name: string): object {
  return { $ref: `#/$defs/${name}` };
}

function list(name: string): object {
  return { type: 'array', uniqueItems: true, items: ref(name) };
}

function text(): object {
  return { type: 'string', minLength: 1 };
}

function level(): object {
  return { enum: ['none', 'note', 'warning', 'error'] };
}

function bag(): object {
  return { type: 'object', properties: { tags: { type: 'array', uniqueItems: true, items: { type: 'string' } } } };
}
