// The fences of the house: who may import what, and what the core may not ask for. Formatting is Prettier's.
import astro from 'eslint-plugin-astro'
import tseslint from 'typescript-eslint'

const clock = [
  { object: 'Date', property: 'now', message: 'The core is told the time; take nowMs as an argument.' },
  { object: 'Math', property: 'random', message: 'Chance is seeded by an argument.' },
]
const bareDate = { selector: "NewExpression[callee.name='Date'][arguments.length=0]", message: 'The time is an argument, never asked for.' }
const casts = {
  selector: 'TSAsExpression[typeAnnotation.typeName.name=/Id$/]',
  message: 'A string becomes an id in its parser (db/ids.ts) only.',
}
const scopeCast = {
  selector: "TSAsExpression[typeAnnotation.typeName.name='OrgScope']",
  message: 'Scopes are minted in src/lib/auth only.',
}
const unscoped = {
  selector: "ArrowFunctionExpression CallExpression[callee.object.name='eb'][callee.property.name='selectFrom']",
  message: 'A sub-select is not scoped: join on both columns, or add whereRef on organisation_id and disable this line with the reason.',
}
// Groups would read a leading # as a comment, so imports are matched by regular expression.
const to = (regex, message) => ({ regex, message })

export default tseslint.config(
  { ignores: ['dist/', 'node_modules/', '.astro/', '.cache/', 'data/', 'public/', 'tests/fixtures/'] },
  ...tseslint.configs.recommended,
  ...tseslint.configs.stylistic,
  ...astro.configs.recommended,
  {
    rules: {
      '@typescript-eslint/no-unused-vars': ['error', { argsIgnorePattern: '^_' }],
      '@typescript-eslint/no-explicit-any': 'error',
      '@typescript-eslint/consistent-type-definitions': 'off',
      '@typescript-eslint/array-type': 'off',
      'no-restricted-syntax': ['error', casts, scopeCast],
    },
  },
  // One block a depth: from each, so many `../` would leave the core.
  ...[1, 2, 3].map((depth) => ({
    files: [`src/lib/core/${'*/'.repeat(depth - 1)}*.ts`],
    rules: {
      'no-restricted-properties': ['error', ...clock],
      'no-restricted-syntax': ['error', bareDate],
      'no-restricted-imports': [
        'error',
        { patterns: [{ regex: `^(?!\\.)|^(\\.\\./){${depth}}`, message: 'The core imports nothing outside itself.' }] },
      ],
    },
  })),
  {
    files: ['db/queries/**/*.ts'],
    rules: {
      'no-restricted-syntax': ['error', casts, scopeCast, unscoped],
      'no-restricted-imports': [
        'error',
        {
          patterns: [
            to('^#lib/(?!core/)', 'Queries know SQL and core types; features call them, not the other way round.'),
            to('^(astro|react)($|[:/])', 'No framework in queries.'),
          ],
        },
      ],
    },
  },
  {
    files: ['src/pages/**', 'src/components/**/*.astro', 'src/layouts/**', 'src/actions/**'],
    rules: {
      '@typescript-eslint/no-restricted-imports': [
        'error',
        {
          patterns: [
            {
              ...to('^kysely$|^better-sqlite3$|^#db/(queries|connection)', 'Pages and actions call src/lib/<feature>; SQL stays in db.'),
              allowTypeImports: true,
            },
          ],
        },
      ],
    },
  },
  {
    files: ['src/components/**/*.tsx', 'src/lib/**/view.ts', 'src/lib/**/schemas.ts', 'src/lib/http/client.ts'],
    rules: {
      '@typescript-eslint/no-restricted-imports': [
        'error',
        {
          patterns: [
            {
              ...to('^#db/(?!enums|ids)|\.server|^node:', 'This runs in the browser: no database, no server module.'),
              allowTypeImports: true,
            },
          ],
        },
      ],
    },
  },
  {
    files: ['jobs/**/*.ts'],
    rules: {
      'no-restricted-imports': [
        'error',
        { patterns: [to('^#db/queries/|^astro($|[:/])', 'A job is a schedule and a call of src/lib/<feature>.')] },
      ],
    },
  },
  { files: ['src/lib/auth/scope.server.ts'], rules: { 'no-restricted-syntax': ['error', casts] } },
  { files: ['db/ids.ts'], rules: { 'no-restricted-syntax': 'off' } },
  { files: ['**/*.mjs', '**/*.js'], rules: { '@typescript-eslint/no-unused-vars': ['error', { argsIgnorePattern: '^_' }] } },
)
