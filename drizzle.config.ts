import { defineConfig } from "drizzle-kit";

export default defineConfig({ dialect: "postgresql", schema: "./db/schema", out: "./drizzle", strict: true });
