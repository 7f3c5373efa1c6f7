import type { CatalogueEntry } from "@/lib/timing/catalogue/catalogue";
