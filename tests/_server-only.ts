// 'server-only' throws outside a React server bundle; tests of server modules run in plain Node.
export {}
