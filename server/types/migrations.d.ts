/** The generated migrations, inlined at build time so that the built folder can be moved anywhere. */
declare module '#migrations' {
  const migrations: import('../database/migrate').Migration[]
  export default migrations
}
