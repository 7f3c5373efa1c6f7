import { driverDefinitionSchema, type DriverDefinition } from "@/lib/serial/driver/definition";
import { shippedDrivers } from "@/lib/serial/drivers/shipped";

/** The same device with two slots and two modes: as much of the code, and less of the wire. */
export function withTwoOfEach(definition: DriverDefinition): DriverDefinition {
  const factory = Object.fromEntries(Object.entries(definition.factory).filter(([key]) => !/\[(?:[3-9]|\d\d)\]/u.test(key)));
  const narrowed = definition.settings.map((setting) => {
    const most = setting.key === "slots[*].mode" || setting.key === "everywhere.powerOnSlot" ? 2 : null;
    return most !== null && setting.value.type === "integer" ? { ...setting, value: { ...setting.value, max: most } } : setting;
  });
  return driverDefinitionSchema.parse({ ...definition, slots: { ...definition.slots, count: 2 }, modes: { ...definition.modes, count: 2 }, settings: narrowed, factory });
}

export const smallDrivers: readonly DriverDefinition[] = shippedDrivers.map(withTwoOfEach);
