/** On a phone an address is broken behind the @, not within a name. */
export function MailAddress({ of }: { of: string }) {
  const [name = '', ...rest] = of.split('@')
  if (rest.length === 0) return of
  return (
    <>
      {name}@<wbr />
      {rest.join('@')}
    </>
  )
}
