const rule = (name, from, to) => ({ name, severity: 'error', from, to })

module.exports = {
  forbidden: [
    rule('no-cycles', {}, { circular: true }),
    rule(
      'shared-is-pure',
      { path: '^shared/' },
      { pathNot: '^(shared/|node_modules/(zod|jstat|@stdlib|luxon|@types/luxon)/)' },
    ),
    rule(
      'stats-stands-alone',
      { path: '^shared/stats/' },
      { pathNot: '^(shared/(stats|kernel)/|node_modules/(jstat|@stdlib)/)' },
    ),
    rule('client-not-server', { path: '^src/' }, { path: '^(server|drizzle)/' }),
    rule('server-not-client', { path: '^server/' }, { path: '^src/' }),
    rule(
      'sql-in-repositories',
      { path: '^server/', pathNot: '(\\.(repository|tables)\\.ts$|^server/(db/|http/|main\\.ts$))' },
      {
        path: '(^node_modules/drizzle-orm|^server/db/|\\.tables\\.ts$)',
        pathNot: '^server/db/(errors|transaction)\\.ts$',
        dependencyTypesNot: ['type-only'],
      },
    ),
    rule(
      'http-in-routes',
      { path: '^server/', pathNot: '(\\.routes\\.ts$|^server/(http/|app\\.ts$))' },
      { path: '^node_modules/(@types/)?express/' },
    ),
    rule('routes-through-services', { path: '\\.routes\\.ts$' }, { path: '\\.(repository|tables)\\.ts$' }),
    rule(
      'neighbours-by-service',
      { path: '^server/([^/]+)/', pathNot: '^server/(db|http)/' },
      { path: '^server/[^/]+/.+\\.(repository|routes)\\.ts$', pathNot: '^server/$1/' },
    ),
    rule(
      'pages-on-top',
      { path: '^src/(components|composables|stores|services)/' },
      { path: '^src/(pages|layouts|router)/' },
    ),
    rule('stores-below-ui', { path: '^src/(stores|services)/' }, { path: '^src/(components|composables)/' }),
    rule('code-not-tests', { path: '^(src|server|shared)/' }, { path: '^tests/' }),
  ],
  options: {
    doNotFollow: { path: 'node_modules' },
    exclude: { path: '(^\\.build|^\\.data|virtual:)' },
    tsPreCompilationDeps: true,
    enhancedResolveOptions: {
      extensions: ['.ts', '.vue', '.js'],
      exportsFields: ['exports'],
      conditionNames: ['import', 'node', 'default', 'types'],
    },
  },
}
