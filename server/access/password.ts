/** Passwords as better-auth keeps them (scrypt), for accounts that are made by invitation or set-up. */
export { hashPassword } from 'better-auth/crypto';
