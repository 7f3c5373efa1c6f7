import { fail, ok, type Result } from "@/lib/result";
import { createDeviceSession, type SessionParts } from "./device-session";
import type { DeviceIdentity, DeviceSession, OpenFailure, RequestError, SessionState } from "./types";

export type OpenSessionOptions = SessionParts & {
  readonly onState?: ((state: SessionState) => void) | undefined;
  readonly signal?: AbortSignal | undefined;
};

export type OpenedSession = { readonly session: DeviceSession; readonly identity: DeviceIdentity };

function failureOf(error: RequestError, wanted: string): OpenFailure {
  if (error.code === "unsupported") return { code: "other-device", found: error.message.split(" answered,")[0] ?? "Another device", wanted };
  if (error.code === "timeout" || error.code === "malformed") return { code: "silent", detail: error.message };
  return { code: "other", detail: error.message };
}

/**
 * Opens a port and finds out who is there. On failure the port is closed again.
 * @param options.signal calls it off
 */
export async function openSession({ onState, signal, ...parts }: OpenSessionOptions): Promise<Result<OpenedSession, OpenFailure>> {
  const session = createDeviceSession(parts);
  const stopListening = onState && session.onState(onState);
  const opened = await session.open(signal);
  const identity = opened.ok ? await session.identify(signal) : null;
  if (opened.ok && identity?.ok) return ok({ session, identity: identity.value });
  stopListening?.();
  await session.close();
  if (!opened.ok) return opened;
  const { maker, model } = parts.driver.definition;
  const error: RequestError = identity && !identity.ok ? identity.error : { code: "lost", message: "The session ended." };
  return fail(failureOf(error, `${maker} ${model}`));
}
