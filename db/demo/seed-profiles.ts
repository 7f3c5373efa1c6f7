import { inArray } from "drizzle-orm";
import type { Db } from "@/db/client";
import { demoId } from "@/db/demo/demo-id";
import { cabinetProfiles } from "@/db/demo/profiles/cabinets";
import type { DemoProfile } from "@/db/demo/profiles/parts";
import { televisionProfiles } from "@/db/demo/profiles/televisions";
import type { People } from "@/db/demo/seed-people";
import { addRevision, createProfile } from "@/db/queries/publish";
import type { Author } from "@/db/queries/publish";
import { profile } from "@/db/schema/profile";

const profileId = (key: string) => demoId(`profile ${key}`);

export const demoProfiles: readonly DemoProfile[] = [...cabinetProfiles, ...televisionProfiles];

/** Adds the demo's profiles that were never there, with their revisions. */
export async function seedProfiles(db: Db, people: People): Promise<void> {
  const ids = demoProfiles.map(({ key }) => profileId(key));
  const standing = await db.select({ id: profile.id }).from(profile).where(inArray(profile.id, ids));
  for (const one of demoProfiles) {
    const person = people.get(one.owner);
    if (person === undefined || standing.some(({ id }) => id === profileId(one.key))) continue;
    await seedProfile(db, person, one);
  }
}

async function seedProfile(db: Db, author: Author, { key, visibility, revisions }: DemoProfile): Promise<void> {
  const id = profileId(key);
  const [first, ...later] = revisions.map(({ at, ...revision }) => ({ ...revision, at: new Date(at) }));
  if (first === undefined) throw new Error(`demo profile ${key} has no revision`);
  await createProfile(db, author, { ...first, id, visibility });
  for (const [index, revision] of later.entries()) {
    const added = await addRevision(db, author, { id, after: index + 1 }, revision);
    if (!added.ok) throw new Error(`demo profile ${key}: ${added.error}`);
  }
}
