import { TextField } from '@/components/ui/field'

/** How a file's name tells candidate and band, for files whose headers do not. */
export function NamePatternField({ value, error }: { value?: string | null; error?: string }) {
  return (
    <TextField
      label="Name pattern"
      name="namePattern"
      className="figures"
      defaultValue={value ?? ''}
      placeholder="{candidate}_{band}"
      autoComplete="off"
      spellCheck={false}
      hint="Reads candidate and band from a file’s name, without folders and endings: {candidate}, {band}, and {any} for what does not matter. SWS0417_g.fits fits {candidate}_{band}, which is taken when this is empty. A manifest stands above it."
      error={error}
    />
  )
}
