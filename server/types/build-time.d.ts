/** The generated migrations, inlined at build time so that the built folder can be moved anywhere. */
declare module '#migrations' {
  const migrations: import('../database/migrate').Migration[]
  export default migrations
}

/** The routes under /api as the file names say them; no method: every method. */
declare module '#api-routes' {
  const routes: import('../utils/allowed-methods').Route[]
  export default routes
}
