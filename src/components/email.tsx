/** An e-mail address that may break behind its @ and, when even that is too long for the page, anywhere. */
export function Email({ address }: { address: string }) {
  const [name, ...rest] = address.split('@');
  return (
    <span className="wrap-break-word">
      {name}
      {rest.length === 0 ? null : (
        <>
          @<wbr />
          {rest.join('@')}
        </>
      )}
    </span>
  );
}
