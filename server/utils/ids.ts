import { createHash, randomBytes } from 'node:crypto'
import { customAlphabet, nanoid } from 'nanoid'

const readable = customAlphabet('23456789abcdefghjkmnpqrstuvwxyz', 10)

/** A short id that is easy to read aloud. It grants nothing. */
export const shortId = () => readable()

/** A capability: 126 bits, as nanoid's 21 characters carry. */
export const linkToken = () => nanoid(21)

/** The random part of a session cookie: 256 bits. */
export const sessionSecret = () => randomBytes(32).toString('base64url')

export const hashOf = (secret: string) => createHash('sha256').update(secret).digest('base64url')
