import type { Request, Response } from 'express';
import { runProgressSchema, runResponse } from '../../../shared/schemas/runs.js';
import { ENDED_RUN_STATUSES } from '../../../shared/types/states.js';
import type { AppContext } from '../../app-context.js';
import type { Run } from '../../models/run.js';
import type { Actor } from '../../policies/actor.js';
import { can } from '../../policies/authorize.js';
import { presentRun } from '../../presenters/run.js';
import { findRun } from '../../queries/runs.js';
import { loadActor } from '../../sessions/load-actor.js';

const HEARTBEAT_MS = 15_000;
const RECONNECT_MS = 2_000;

/**
 * Streams what happens to a run until it has ended: `run` now and on every change of status, `progress` in between.
 * Nothing depends on events that were missed: each carries the whole state, so a reconnection simply begins again.
 */
export async function streamRunEvents(context: AppContext, actor: Actor, run: Run, request: Request, response: Response): Promise<void> {
  // A browser reconnects after the end of a stream; no content tells it that there is nothing more to come.
  if (ENDED_RUN_STATUSES.includes(run.status) && request.get('Last-Event-ID') !== undefined) {
    response.status(204).end();
    return;
  }
  response.writeHead(200, {
    'Content-Type': 'text/event-stream; charset=utf-8',
    'Cache-Control': 'no-cache, no-transform',
    'X-Accel-Buffering': 'no',
  });
  response.flushHeaders();

  let eventNumber = 0;
  const send = (event: 'run' | 'progress', data: unknown) => {
    if (!response.writableEnded) response.write(`id: ${(eventNumber += 1)}\nevent: ${event}\ndata: ${JSON.stringify(data)}\n\n`);
  };
  const close = () => {
    unsubscribe();
    clearInterval(heartbeat);
    if (!response.writableEnded) response.end();
  };
  const sendRun = (current: Run) => {
    const progress = context.queue?.progress(run.id) ?? null;
    send('run', runResponse.parse(presentRun(actor, current, progress)));
    if (ENDED_RUN_STATUSES.includes(current.status)) close();
  };

  // Changes are sent one after the other, in the order in which they happened.
  let sending: Promise<void> = Promise.resolve();
  const sendCurrent = () => {
    sending = sending
      .then(async () => {
        const current = response.writableEnded ? null : await findRun(actor, run.id);
        if (current === null) close();
        else sendRun(current);
      })
      .catch((error: unknown) => {
        context.logger.error({ err: error, runId: run.id }, 'an event stream broke off');
        close();
      });
  };
  const unsubscribe =
    context.queue?.subscribe(run.id, (event) => {
      if (event.kind === 'progress') send('progress', runProgressSchema.parse(event.progress));
      else sendCurrent();
    }) ?? (() => undefined);
  const heartbeat = setInterval(() => void beat().catch(() => close()), HEARTBEAT_MS);
  // The comment keeps proxies from closing the line; the look at the session ends the stream of people who lost access.
  const beat = async () => {
    const present = await loadActor(context.sequelize, actor.sessionId);
    if (present === null || !can(present, 'run.read', run)) close();
    else if (!response.writableEnded) response.write(': still here\n\n');
  };
  response.on('close', close);

  response.write(`retry: ${RECONNECT_MS}\n\n`);
  // Read again after subscribing: a change between the first look and now would be missed otherwise.
  sendCurrent();
  await sending;
}
