import Link from "next/link";

/** The caution that holds everywhere, and where the rest is. */
export function SiteFooter() {
  return (
    <footer className="gutter mt-auto flex flex-wrap items-start gap-x-14 gap-y-4 border-t border-line py-6 text-sm text-muted md:px-16">
      <p className="min-w-[min(100%,20rem)] max-w-[76ch] flex-1">
        A signal above or below a CRT’s range can damage it. Leave the screen unplugged until the device’s raster has
        been read and fits. Work inside a cabinet belongs to a licensed technician.
      </p>
      <nav aria-label="More" className="flex flex-wrap gap-x-8 gap-y-2">
        <Link href="/library" className="hover:text-text">
          Library
        </Link>
        <Link href="/screens" className="hover:text-text">
          Screens
        </Link>
        <Link href="/standards" className="hover:text-text">
          Standards
        </Link>
        <Link href="/attenuator" className="hover:text-text">
          Attenuator
        </Link>
        <a href="/api/openapi.json" className="hover:text-text">
          HTTP interface
        </a>
      </nav>
    </footer>
  );
}
