"use client";

import Link from "next/link";
import { useEffect, useState } from "react";
import { Button } from "@/components/ui/button";
import { SelectField } from "@/components/ui/field";
import { StopIcon } from "@/components/ui/finding-icon";
import { NoticeList } from "@/components/drivers/notice-list";
import { useModels } from "@/components/bench/use-models";
import { useBench, useBenchAccount, useBenchActions } from "@/components/bench/bench-provider";
import { hostSystem, portHelp, type PortFailure } from "@/components/bench/port-help";

/** What the browser can do, known only after the page runs in one. */
function useSerialSupport(): PortFailure | null | "asking" {
  const [support, setSupport] = useState<PortFailure | null | "asking">("asking");
  useEffect(() => {
    // Before hydration nobody knows; the answer never changes while the page lives.
    const found: PortFailure | null = !isSecureContext ? { code: "insecure-context" } : "serial" in navigator ? null : { code: "no-web-serial" };
    queueMicrotask(() => setSupport(found));
  }, []);
  return support;
}

/** Choose a real port or a simulated device. */
export function ConnectPanel() {
  const models = useModels();
  const [slug, setSlug] = useState(models[0]?.slug ?? "");
  const link = useBench((state) => state.link);
  const account = useBenchAccount();
  const { connectReal, connectSimulated } = useBenchActions();
  const support = useSerialSupport();
  const isBusy = link.name === "opening" || link.name === "identifying";
  return (
    <div className="gutter grid gap-x-14 gap-y-8 py-10 lg:grid-cols-2">
      <section aria-labelledby="connect-head" className="max-w-[60ch]">
        <h1 id="connect-head" className="mb-3 text-3xl tracking-[-0.02em]">Connect a device</h1>
        <p className="mb-5 text-muted">
          Leave the screen unplugged until the device&apos;s raster has been read and fits. A signal above or below a CRT&apos;s range can damage its deflection stage.
        </p>
        <SelectField
          label="Model" value={slug} onChange={(event) => setSlug(event.target.value)} fieldClassName="mb-4 max-w-[340px]"
          options={models.map((driver) => ({ value: driver.slug, label: `${driver.maker} ${driver.model}` }))}
        />
        <div className="flex flex-wrap gap-3">
          <Button kind={account ? "primary" : "plain"} size="large" disabled={isBusy || !account || support !== null} onClick={() => void connectReal(slug)}>Choose a port</Button>
          <Button kind={account ? "plain" : "primary"} size="large" disabled={isBusy} onClick={() => void connectSimulated(slug)}>Use a simulated device</Button>
        </div>
        <p className="mt-3 text-sm text-muted">
          {account ? "A simulated device behaves like a real one, over a wire as slow as a real one. What it shows is simulated." : (
            <>A simulated device needs no account; its backups stay in this page. For a real one, <Link className="link" href="/sign-in?from=/bench">sign in</Link>, so that every slot is backed up before anything is written.</>
          )}
        </p>
        {account?.role === "maintainer" || account?.role === "admin" ? <p className="mt-2 text-sm text-muted">To get to know a device that has no driver yet, or to try a draft, <Link className="link" href="/recordings/listen">listen to it</Link>: that only reads and records.</p> : null}
        <p role="status" className="mt-4 min-h-6">{isBusy ? (link.name === "opening" ? "Opening the port…" : "Asking the device who it is…") : ""}</p>
      </section>
      {link.name === "failed" ? <Failure failure={link.failure} /> : support !== null && support !== "asking" ? <Failure failure={support} /> : null}
      <NoticeList className="lg:col-span-2" />
    </div>
  );
}

function Failure({ failure }: { readonly failure: PortFailure }) {
  const help = portHelp(failure, hostSystem(navigator.userAgent));
  return (
    <section role="alert" className="max-w-[64ch] border-t-2 border-halt pt-4">
      <h2 className="mb-2 flex items-center gap-2 text-xl text-halt"><StopIcon />{help.title}</h2>
      <ul className="list-disc space-y-1.5 pl-5">{help.causes.map((cause) => <li key={cause}>{cause}</li>)}</ul>
      {help.retry ? <p className="mt-3 text-muted">Then choose the port again. Nothing was written.</p> : null}
    </section>
  );
}
