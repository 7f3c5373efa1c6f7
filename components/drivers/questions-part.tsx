"use client";

import Link from "next/link";
import { useState } from "react";
import { useIsMaintainer } from "@/components/drivers/use-is-maintainer";
import { useAnswer, useAsk, useQuestions, useRecordings } from "@/components/recordings/use-recordings";
import { Button } from "@/components/ui/button";
import { SelectField, TextAreaField } from "@/components/ui/field";
import { formatMoment } from "@/components/ui/moments";
import { ProblemMessage } from "@/components/ui/problem-message";
import { useToast } from "@/components/ui/toast";
import type { QuestionView } from "@/lib/contracts/recording";

/** Questions to the maintainers of a driver: one's own, for maintainers everybody's. */
export function QuestionsPart({ slug }: { readonly slug: string }) {
  const isMaintainer = useIsMaintainer();
  const questions = useQuestions(slug, true);
  const rows = questions.data?.pages.flatMap((page) => page.items) ?? [];
  return (
    <div className="grid gap-x-12 gap-y-6 xl:grid-cols-[minmax(0,1fr)_minmax(0,420px)]">
      <div className="min-w-0">
        {questions.error === null ? null : <ProblemMessage error={questions.error} />}
        {questions.isPending ? <p className="text-muted">Loading</p> : null}
        {questions.isSuccess && rows.length === 0 ? (
          <p className="text-muted">
            {isMaintainer ? "Nobody asked anything yet." : "You asked nothing about this driver yet."}
          </p>
        ) : null}
        <ul>
          {rows.map((question) => (
            <Question key={question.id} question={question} canAnswer={isMaintainer} />
          ))}
        </ul>
        {questions.hasNextPage ? (
          <Button size="small" className="mt-3" disabled={questions.isFetchingNextPage} onClick={() => void questions.fetchNextPage()}>
            Show more
          </Button>
        ) : null}
      </div>
      <AskForm slug={slug} />
    </div>
  );
}

function Question({ question, canAnswer }: { readonly question: QuestionView; readonly canAnswer: boolean }) {
  const { asker, text, recording, answer, createdAt } = question;
  return (
    <li className="border-b border-line py-3 first:pt-0">
      <p className="text-sm text-muted">
        {asker.name}, {formatMoment(new Date(createdAt))}
        {recording === null ? null : (
          <>
            , with the recording{" "}
            <Link href={`/recordings/${recording.id}`} className="link">
              {recording.name}
            </Link>
          </>
        )}
      </p>
      <p className="whitespace-pre-line">{text}</p>
      {answer === null ? null : (
        <p className="mt-2 whitespace-pre-line border-l-3 border-line pl-3">
          <span className="block text-sm text-muted">
            {answer.by ?? "A maintainer"} answered {formatMoment(new Date(answer.at))}
          </span>
          {answer.text}
        </p>
      )}
      {answer === null && !canAnswer ? <p className="mt-1 text-sm text-muted">No answer yet.</p> : null}
      {answer === null && canAnswer ? <AnswerForm id={question.id} /> : null}
    </li>
  );
}

function AnswerForm({ id }: { readonly id: string }) {
  const [text, setText] = useState("");
  const answer = useAnswer();
  return (
    <form
      className="mt-2"
      onSubmit={(event) => {
        event.preventDefault();
        answer.mutate({ id, text: text.trim() });
      }}
    >
      <TextAreaField label="Answer" rows={2} maxLength={4000} value={text} onChange={(event) => setText(event.target.value)} />
      {answer.error === null ? null : <ProblemMessage error={answer.error} />}
      <Button type="submit" size="small" className="mt-2" disabled={text.trim() === "" || answer.isPending}>
        Answer
      </Button>
    </form>
  );
}

function AskForm({ slug }: { readonly slug: string }) {
  const [text, setText] = useState("");
  const [recordingId, setRecordingId] = useState("");
  const recordings = useRecordings(slug);
  const ask = useAsk(slug);
  const toast = useToast();
  const mine = recordings.data?.pages.flatMap((page) => page.items).filter((one) => one.mine) ?? [];
  const onAsk = () =>
    ask.mutate(
      { text: text.trim(), ...(recordingId === "" ? {} : { recordingId }) },
      {
        onSuccess: () => {
          setText("");
          setRecordingId("");
          toast({ text: "The maintainers have your question." });
        },
      },
    );
  return (
    <form
      className="flex flex-col gap-3"
      onSubmit={(event) => {
        event.preventDefault();
        onAsk();
      }}
    >
      <h3 className="text-lg">Ask the maintainers</h3>
      <TextAreaField
        label="Question"
        rows={5}
        maxLength={4000}
        value={text}
        hint="What you did, what you expected, what the device said or showed."
        onChange={(event) => setText(event.target.value)}
      />
      <SelectField
        label="Recording"
        aside="optional"
        value={recordingId}
        hint="The maintainers can read one that you attach, from then on. Nobody else can."
        onChange={(event) => setRecordingId(event.target.value)}
        options={[{ value: "", label: "none" }, ...mine.map(({ id, name }) => ({ value: id, label: name }))]}
      />
      {ask.error === null ? null : <ProblemMessage error={ask.error} />}
      <div className="flex flex-wrap items-center gap-4">
        <Button type="submit" kind="primary" disabled={text.trim() === "" || ask.isPending}>
          Ask
        </Button>
        <Link href="/recordings" className="link text-sm">
          Upload a recording
        </Link>
      </div>
    </form>
  );
}
