/**
 * Ways to break the serial code, each with the smallest tests that have to notice.
 *
 * `find` stands once in `file` and is replaced by `replace`. A break that no test notices is a hole in the tests, not in the code.
 */
const UNIT = "tests/unit/serial";
const session = [`${UNIT}/session/session.test.ts`, `${UNIT}/session/drain.test.ts`];
const runs = [`${UNIT}/run/run.test.ts`, `${UNIT}/run/run-proof.test.ts`, `${UNIT}/run/run-loss.test.ts`];
const aligns = [`${UNIT}/run/align.test.ts`, `${UNIT}/run/align-loss.test.ts`];
const sweepShort = ["tests/faults/session/fault-sweep.test.ts"];
const sweepRun = ["tests/faults/run/requests-lf8.test.ts"];
const replay = ["tests/faults/run/replay.test.ts"];
const modbus = [`${UNIT}/protocols/modbus.test.ts`];
const packet = [`${UNIT}/protocols/packet.test.ts`];
const text = [`${UNIT}/protocols/text-codec.test.ts`];

const EXCHANGER = "lib/serial/session/exchanger.ts";
const PROCEDURES = "lib/serial/run/run-procedures.ts";
const REQUESTS = "lib/serial/run/run-requests.ts";
const GOAL = "lib/serial/run/run-goal.ts";
const ALIGN = "lib/serial/run/run-align.ts";
const LINE = "lib/serial/protocols/text/line.ts";
const CODEC = "lib/serial/protocols/modbus/modbus-codec.ts";

export const mutants = [
  // Checks and frames.
  { name: "a wrong check of a text line is let through", file: LINE, find: 'if (check === "wrong") return { kind: "noise"', replace: 'if (line === "") return { kind: "noise"', tests: text },
  { name: "a text reply without its check is let through", file: LINE, find: 'if (check === "none" && protocol.check?.requiredInReplies)', replace: 'if (check === "none" && line === "")', tests: text },
  { name: "the CRC of a Modbus frame is not looked at", file: "lib/serial/protocols/modbus/frames.ts", find: "if (!isSealed(bytes)) {", replace: "if (bytes.length === 0) {", tests: modbus },
  { name: "the check of a packet is not looked at", file: "lib/serial/protocols/packet/packets.ts", find: "return check.every((byte, index) => packet[packet.length - check.length + index] === byte) ?", replace: "return check.length > 0 ?", tests: packet },
  { name: "a check begins with another number", file: "lib/serial/protocols/checksum.ts", find: '"crc16-ibm-3740": { width: 16, poly: 0x1021, init: 0xffff', replace: '"crc16-ibm-3740": { width: 16, poly: 0x1021, init: 0x1d0f', tests: [`${UNIT}/protocols/checksum.test.ts`] },
  { name: "an END inside a packet is not stuffed", file: "lib/serial/protocols/packet/packets.ts", find: "byte === END ? [ESC, ESC_END] : ", replace: "", tests: packet },

  // What answers what.
  { name: "another unit's Modbus reply is taken", file: CODEC, find: 'if (frame.kind === "noise" || frame.bytes[0] !== unit) return OTHER;', replace: 'if (frame.kind === "noise") return OTHER;', tests: modbus },
  { name: "a Modbus reply of another length is taken", file: CODEC, find: "return found[2] === 2 * count ? reply", replace: "return count > 0 ? reply", tests: modbus },
  { name: "a Modbus exception is taken for another request's", file: CODEC, find: "if (frame.bytes[1] !== (code | EXCEPTION_BIT)) return OTHER;", replace: "", tests: modbus },
  { name: "a packet of another block is taken", file: "lib/serial/protocols/packet/packet-codec.ts", find: "if (!head.every((byte, index) => payload[index] === byte)) return OTHER;", replace: "if (payload[0] !== head[0]) return OTHER;", tests: packet },
  { name: "a reply that comes while the line is drained is taken", file: EXCHANGER, find: 'if (quarantine.active) return wireLog.in(frame.bytes, { note: frame.kind === "noise" ? "noise" : "late" });', replace: "", tests: [...session, ...sweepShort] },
  { name: "more than one request that does not name its reply is in flight", file: EXCHANGER, find: "return !alone && inFlight.length < pace.inFlight;", replace: "return inFlight.length < pace.inFlight;", tests: session },

  // Draining and retries.
  { name: "the line is not drained after a timeout", file: EXCHANGER, find: "recallInFlight({ code: \"timeout\", message }, job);\n    clearLine();", replace: "recallInFlight({ code: \"timeout\", message }, job);\n    pump();", tests: [...session, ...sweepShort] },
  { name: "the line is not drained after a request was called off", file: EXCHANGER, find: "recallInFlight(error, null);\n          clearLine();", replace: "recallInFlight(error, null);\n          pump();", tests: [...session, ...sweepShort] },
  { name: "the line is not drained when a request that was sent twice is answered", file: EXCHANGER, find: "if (job.sentAgain) clearLine();", replace: "", tests: [...session, ...sweepShort] },
  { name: "bytes do not lengthen a drain", file: "lib/serial/session/quarantine.ts", find: "if (clock.nowMs() < hold.untilMs) cancelTimer = clock.after(hold.quietMs, end);", replace: "if (clock.nowMs() < hold.untilMs) cancelTimer = clock.after(0, end);", tests: [...session, ...sweepShort] },
  { name: "writes, recalls and commits are sent again", file: EXCHANGER, find: "job.request.idempotent && job.retriesLeft >= 0", replace: "job.retriesLeft >= 0", tests: session },
  { name: "a busy device is asked again for a write", file: EXCHANGER, find: "if (!job.request.idempotent || job.busyLeft <= 0)", replace: "if (job.busyLeft <= 0)", tests: session },
  { name: "retries have no bound", file: EXCHANGER, find: "if (job === culprit) job.retriesLeft -= 1;", replace: "", tests: session },
  { name: "a lost reply to a write counts as done", file: "lib/serial/session/requests.ts", find: 'return code === "timeout" || code === "malformed" ? ok({ outcome: "unknown", message }) : result;', replace: 'return code === "timeout" || code === "malformed" ? ok(ACKNOWLEDGED) : result;', tests: session },

  // The port.
  { name: "reading ends with the first break of the line", file: "lib/serial/session/link.ts", find: "if (glitches > MAX_GLITCHES) return lose", replace: "if (glitches > 0) return lose", tests: session },
  { name: "the read stream stays locked", file: "lib/serial/session/link.ts", find: "      reader.releaseLock();\n      reader = null;\n    }\n  }\n\n  async function pump", replace: "      reader = null;\n    }\n  }\n\n  async function pump", tests: [...session, ...replay] },
  { name: "a device is asked but once who it is", file: "lib/serial/session/identify.ts", find: "if (before && sameIdentity(before, identity)) {", replace: "if (ask >= 0) {", tests: session },
  { name: "a restart in the midst of a whole read goes unseen", file: "lib/serial/session/read-whole.ts", find: 'if (before.value !== after.value) return ok("moved");', replace: "", tests: session },

  // The run.
  { name: "another device is taken for the run's", file: "lib/serial/run/live-run.ts", find: 'if (!sameDevice(identity.value, core.identity)) return fail("other-device");', replace: "", tests: runs },
  { name: "a request leaves before it stands in the journal", file: REQUESTS, find: 'if (!(await core.record({ ...body, outcome: "leaving" }, number))) return null;', replace: "", tests: runs },
  { name: "a write is not read back", file: REQUESTS, find: "const stored = found.every(({ value }, at) => value === step.writes[at]?.value);", replace: "const stored = found.length > 0;", tests: runs },
  { name: "a write is sent again to a device that has started anew", file: REQUESTS, find: 'return answer.value === (counts ? core.lastRead?.bootCount : core.slotOn) ? "no" : "perhaps";', replace: 'return "no";', tests: replay },
  { name: "a recall is not read back", file: REQUESTS, find: 'if (active.value !== slot) return "no";', replace: "", tests: [...runs, ...sweepRun] },
  { name: "a commit is sent twice", file: PROCEDURES, find: 'if ((await commit(core, "forward")) === "lost") return "rest";\n', replace: 'if ((await commit(core, "forward")) === "lost") return "rest";\n  await commit(core, "forward");\n', tests: runs },
  { name: "a commit's acknowledgement is taken for its proof", file: PROCEDURES, find: 'if (canAskCommitted(core)) return "arrive";', replace: 'if (canAskCommitted(core)) {\n    await core.say("kept");\n    return "rest";\n  }', tests: runs },
  { name: "what is read counts as stored", file: GOAL, find: "proved: !volatileWrites || !facts.commitSent ||", replace: "proved: read.activeSlot >= 0 ||", tests: runs },
  { name: "a restart before the last write counts as proof", file: "lib/serial/run/run-facts.ts", find: "return { ...facts, bootCount: null, statedCycle: false, lastWriteAtMs: entry.atMs };", replace: "return { ...facts, statedCycle: false, lastWriteAtMs: entry.atMs };", tests: [...runs, `${UNIT}/run/journal.test.ts`] },
  { name: "trying begins whatever the whole read says", file: PROCEDURES, find: 'if (!judged.allNew || core.wantsBack) return "put-back";\n  return core.facts.commitSent', replace: 'if (core.wantsBack) return "put-back";\n  return core.facts.commitSent', tests: [...runs, ...sweepRun] },
  { name: "keeping does not look at the device first", file: PROCEDURES, find: 'if (!first.allNew || core.wantsBack) return "put-back";', replace: 'if (core.wantsBack) return "put-back";', tests: runs },
  { name: "putting back is believed without a whole read", file: PROCEDURES, find: "if (!judged.allOld || !judged.home) return settleMixed", replace: "if (judged === null) return settleMixed", tests: [...runs, ...sweepRun] },
  { name: "the device timer is not disarmed", file: PROCEDURES, find: 'if (hasTimer(core) && (await timer(core, "disarm")) === "lost") return "rest";\n  const judged', replace: "const judged", tests: [...runs, ...sweepRun] },
  { name: "the device timer is not extended when trying begins", file: PROCEDURES, find: "  const extended = await extendTrial(core);", replace: '  const extended = core.busy ? "done" : await extendTrial(core);', tests: [...runs, ...sweepRun] },
  { name: "a step of alignment is made upon a device that has started anew", file: ALIGN, find: 'if (holds === "no") return "arrive";', replace: "", tests: aligns },
  { name: "the journal does not say what was aligned", file: ALIGN, find: 'if (!(await core.record({ kind: "align", values: step.changes }))) return "rest";', replace: "", tests: aligns },
  { name: "steps of alignment do not begin the countdown again", file: ALIGN, find: "core.startCountdown();", replace: "", tests: aligns },
  { name: "a step of alignment goes out although a check stops it", file: "lib/serial/run/align-step.ts", find: 'if (stops.length > 0) return problem("stopped", stops);', replace: "", tests: aligns },
  { name: "the raster that is out does not count", file: GOAL, find: "return out === undefined || sameOutput(out,", replace: "return out === undefined || read.activeSlot >= 0 || sameOutput(out,", tests: [...runs, ...sweepRun] },
  { name: "all new is kept whatever the owner said last", file: PROCEDURES, find: 'if (allNew && word === "keep") {', replace: "if (allNew && word !== null) {", tests: runs },
  { name: "a Keep after the countdown is taken", file: "lib/serial/run/live-run.ts", find: 'if (core.state === "trying" && core.link === "up" && !core.busy && core.countdownOver) return fail("too-late");', replace: "", tests: runs },

  // Bounds.
  { name: "the wire log forgets nothing", file: "lib/serial/wire-log.ts", find: "if (ring.length < maxEntries) ring.push(added);", replace: "if (ring.length >= 0) ring.push(added);", tests: [`${UNIT}/session/wire-log.test.ts`] },
];
