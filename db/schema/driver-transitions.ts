export type DriverVersionState = "draft" | "conformance" | "published" | "withdrawn";

/** Where a driver version may go. A candidate whose definition is changed is a draft again; what was published is never changed. */
export const driverTransitions: Readonly<Record<DriverVersionState, readonly DriverVersionState[]>> = {
  draft: ["conformance"],
  conformance: ["draft", "published"],
  published: ["withdrawn"],
  withdrawn: [],
};
