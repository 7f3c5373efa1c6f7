/** Invented people of the demo. Their passwords are public: they are printed at the start. */
export const demoAccounts = [
  { name: "Imke R.", email: "imke@saltmarsh.example", password: "low tide at nine", role: "owner" },
  { name: "Tobin V.", email: "tobin@saltmarsh.example", password: "two left gloves", role: "owner" },
  { name: "Maren O.", email: "maren@saltmarsh.example", password: "copper kettle song", role: "maintainer" },
  { name: "Edda K.", email: "edda@saltmarsh.example", password: "seven grey geese", role: "admin" },
] as const;

export type DemoAccount = (typeof demoAccounts)[number];
export type DemoPerson = "imke" | "tobin" | "maren" | "edda";

/** The account of a person, by the first part of the address. */
export function demoAccount(person: DemoPerson): DemoAccount {
  const found = demoAccounts.find(({ email }) => email.startsWith(`${person}@`));
  if (found === undefined) throw new Error(`${person} has no demo account`);
  return found;
}
