import { describe, expect, it } from 'vitest';
import { openApiDocument } from './openapi.ts';
import { allContracts } from './schemas/all.ts';

describe('the API description (OpenAPI Specification 3.1)', () => {
  const document = openApiDocument();

  it('has every contract, with its method', () => {
    for (const { path, method } of allContracts) {
      expect(Object.keys(document.paths?.[path] ?? {}), path).toContain(method.toLowerCase());
    }
  });

  it('can be written as JSON, and names what a write needs', () => {
    const place = document.paths?.['/api/{slug}/visits/{id}/place']?.post;
    const text = JSON.stringify(place);
    expect(text).toContain('Idempotency-Key');
    expect(text).toContain('baseVersion');
    expect(JSON.stringify(document)).toContain('"Snapshot"');
  });
});
