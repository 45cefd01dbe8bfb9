import { fileURLToPath } from 'node:url';
import { Application } from 'typedoc';
import { expect, test } from 'vitest';

test('the pages of the public names are made without a warning, and no name or property lacks its docstring', async () => {
  const options = fileURLToPath(new URL('../../packages/fem-core/typedoc.json', import.meta.url));
  const app = await Application.bootstrapWithPlugins({ options, logLevel: 'None' });
  expect(app.options.getValue('validation')).toMatchObject({
    notExported: true,
    invalidLink: true,
    notDocumented: true,
  });
  const project = await app.convert();
  expect(project).toBeDefined();
  if (project !== undefined) app.validate(project);
  expect([app.logger.errorCount, app.logger.warningCount]).toEqual([0, 0]);
}, 120_000);
