/** How many rows a table holds, beside its title. */
export function Total({ count, noun }: { count: number; noun: string }) {
  return (
    <span className="text-small text-faded tabular">
      {count} {noun}
      {count === 1 ? '' : 's'}
    </span>
  );
}
