import { ButtonLink } from "@/components/ui/button";

export default function NotFound() {
  return (
    <main className="gutter flex flex-1 flex-col items-start justify-center gap-4 py-16 md:px-16">
      <h1 className="text-3xl">There is no such page</h1>
      <p className="max-w-[60ch] text-muted">
        The address may be wrong, or what stood here was deleted or belongs to somebody else.
      </p>
      <div className="flex flex-wrap gap-3">
        <ButtonLink href="/library">Look through the library</ButtonLink>
        <ButtonLink href="/">Front page</ButtonLink>
      </div>
    </main>
  );
}
