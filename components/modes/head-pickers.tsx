"use client";

import { useId } from "react";
import { useScreens } from "@/components/screens/use-screens";
import { useModes, useModesActs } from "@/components/modes/modes-context";
import { DEFAULT_SOURCE } from "@/components/modes/store/choices";
import { deviceBySlug, sourceFromText, sourceToText } from "@/components/modes/store/link";
import { sourceWords } from "@/components/modes/words";
import { shippedDrivers } from "@/lib/serial/drivers/shipped";
import { screenPresets } from "@/lib/timing/screen-presets";
import type { SourceFormat } from "@/lib/timing/raster";

const progressive = (activePx: number, activeLines: number, fieldRateHz: number): SourceFormat => ({
  activePx,
  activeLines,
  interlaced: false,
  fieldRateHz,
});
const interlaced = (activePx: number, activeLines: number, fieldRateHz: number): SourceFormat => ({
  activePx,
  activeLines,
  interlaced: true,
  fieldRateHz,
});

/** What sources send as a rule. */
const SOURCES: readonly SourceFormat[] = [
  DEFAULT_SOURCE,
  progressive(1920, 1080, 59.94),
  progressive(1920, 1080, 50),
  progressive(1280, 720, 60),
  progressive(1280, 720, 59.94),
  progressive(1280, 720, 50),
  progressive(640, 480, 60),
  progressive(720, 480, 59.94),
  progressive(720, 576, 50),
  interlaced(720, 480, 59.94),
  interlaced(720, 576, 50),
];

const ANY = "any";
const NOTHING = "none";

/** Which screen, what arrives, which device: the sentence that the page stands under. */
export function HeadPickers() {
  return (
    <div className="flex flex-wrap items-baseline gap-x-6 gap-y-1">
      <ScreenPicker />
      <SourcePicker />
      <DevicePicker />
    </div>
  );
}

type PickProps = {
  readonly word: string;
  readonly label: string;
  readonly value: string;
  readonly options: readonly { readonly value: string; readonly label: string; readonly group?: string }[];
  readonly onChange: (value: string) => void;
};

/** A word of a sentence to choose: the system's own list, so that it is at home on a phone. */
function Pick({ word, label, value, options, onChange }: PickProps) {
  const id = useId();
  const groups = [...new Set(options.map(({ group }) => group))];
  return (
    <span className="flex min-w-0 items-baseline gap-2.5">
      <label htmlFor={id} className="text-muted">
        {word}
        <span className="sr-only"> {label}</span>
      </label>
      <select
        id={id}
        value={value}
        onChange={(event) => onChange(event.target.value)}
        className="field-sizing-content max-w-[min(70vw,300px)] truncate border-b border-edge bg-transparent py-1 font-strong text-text hover:border-text"
      >
        {groups.map((group) => {
          const inGroup = options.filter((option) => option.group === group);
          const items = inGroup.map((option) => (
            <option key={option.value} value={option.value}>
              {option.label}
            </option>
          ));
          return group === undefined ? (
            items
          ) : (
            <optgroup key={group} label={group}>
              {items}
            </optgroup>
          );
        })}
      </select>
    </span>
  );
}

function ScreenPicker() {
  const screen = useModes((state) => state.choices.screen);
  const { chooseScreen } = useModesActs();
  const own = useScreens().data ?? [];
  const known = [
    ...own.map(({ id, name }) => ({ value: id, label: name, group: "Yours" })),
    ...screenPresets.map(({ id, envelope }) => ({ value: id, label: envelope.name, group: "Standard envelopes" })),
  ];
  const isKnown = known.some(({ value }) => value === screen.id);
  const ofLink = { value: screen.id, label: screen.envelope?.name ?? "being loaded", group: "From the link" };
  const choose = (id: string) => {
    const envelope = own.find((one) => one.id === id)?.envelope ?? screenPresets.find((one) => one.id === id)?.envelope;
    if (envelope !== undefined) chooseScreen({ id, envelope });
  };
  return (
    <Pick
      word="for"
      label="this screen"
      value={screen.id}
      options={isKnown ? known : [ofLink, ...known]}
      onChange={choose}
    />
  );
}

function SourcePicker() {
  const source = useModes((state) => state.choices.source);
  const { chooseSource } = useModesActs();
  const value = source === null ? NOTHING : sourceToText(source);
  const usual = SOURCES.map((format) => ({ value: sourceToText(format), label: sourceWords(format) }));
  const isUsual = source === null || usual.some((option) => option.value === value);
  const options = [
    ...(isUsual || source === null ? [] : [{ value, label: sourceWords(source) }]),
    ...usual,
    { value: NOTHING, label: "a source not known" },
  ];
  return (
    <Pick
      word="from"
      label="this source"
      value={value}
      options={options}
      onChange={(text) => chooseSource(sourceFromText(text) ?? null)}
    />
  );
}

function DevicePicker() {
  const device = useModes((state) => state.choices.device);
  const { chooseDevice } = useModesActs();
  const options = [
    { value: ANY, label: "any device" },
    ...shippedDrivers.map(({ slug, maker, model }) => ({ value: slug, label: `${maker} ${model}` })),
  ];
  return (
    <Pick
      word="on"
      label="this device"
      value={device?.slug ?? ANY}
      options={options}
      onChange={(slug) => chooseDevice(deviceBySlug(slug) ?? null)}
    />
  );
}
