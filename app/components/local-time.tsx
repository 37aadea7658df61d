import { useSyncExternalStore } from "react";

const never = () => () => {};

/**
 * A moment, stored and rendered in UTC. The reader's own zone takes its place once the page is alive, so that
 * server and browser agree on the first text whatever the zone.
 */
export function LocalTime({ at }: { at: string }) {
  const alive = useSyncExternalStore(
    never,
    () => true,
    () => false,
  );
  return (
    <time
      dateTime={at}
      title={`${at.slice(0, 19).replace("T", " ")} UTC`}
      className="whitespace-nowrap tabular-nums"
    >
      {alive ? inReadersZone(at) : inUtc(at)}
    </time>
  );
}

function inUtc(at: string): string {
  return `${at.slice(0, 10)} ${at.slice(11, 16)} UTC`;
}

const pad = (part: number) => String(part).padStart(2, "0");

function inReadersZone(at: string): string {
  const moment = new Date(at);
  const day = `${moment.getFullYear()}-${pad(moment.getMonth() + 1)}-${pad(moment.getDate())}`;
  return `${day} ${pad(moment.getHours())}:${pad(moment.getMinutes())}`;
}
