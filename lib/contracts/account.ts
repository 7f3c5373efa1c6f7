import { z } from "zod";
import { idSchema, lineText, timeSchema } from "@/lib/contracts/page";

/** Addresses are told apart without regard to case. */
const emailSchema = z.string().trim().toLowerCase().max(254).pipe(z.email());

/** At least ten characters, any characters: length is what counts. The upper bound keeps hashing cheap. */
export const newPasswordSchema = z.string().min(10, "needs at least 10 characters").max(200);

export const registration = z.object({ name: lineText(80), email: emailSchema, password: newPasswordSchema });
export type Registration = z.input<typeof registration>;

/** The same answer whether or not the address had an account, so it tells nobody who has one. */
export const registrationTaken = z.object({ next: z.literal("sign-in") });

export const signIn = z.object({ email: emailSchema, password: z.string().min(1).max(200) });
export type SignIn = z.input<typeof signIn>;

export const roleSchema = z.enum(["owner", "maintainer", "admin"]);

export const accountView = z.object({
  id: idSchema,
  name: z.string(),
  email: z.string(),
  role: roleSchema,
  createdAt: timeSchema,
});
export type AccountView = z.infer<typeof accountView>;

export const accountChange = z.object({ name: lineText(80) });
export type AccountChange = z.input<typeof accountChange>;

/** Changing the password signs every other browser out. */
export const passwordChange = z.object({ current: z.string().min(1).max(200), next: newPasswordSchema });
export type PasswordChange = z.input<typeof passwordChange>;

export const sessionView = z.object({
  id: idSchema,
  createdAt: timeSchema,
  lastSeenAt: timeSchema,
  userAgent: z.string().nullable(),
  /** The one that asks. */
  current: z.boolean(),
});
export type SessionView = z.infer<typeof sessionView>;

export const sessionList = z.object({ items: z.array(sessionView) });
export const sessionsRevoked = z.object({ revoked: z.number().int() });
