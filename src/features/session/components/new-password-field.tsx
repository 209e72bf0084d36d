import { TextInput } from '../../../components/field';

export function NewPasswordField({
  value,
  onValueChange,
  error,
}: {
  value: string;
  onValueChange: (value: string) => void;
  error: string | undefined;
}) {
  return (
    <TextInput
      label="New password"
      type="password"
      autoComplete="new-password"
      hint="At least 10 characters. A few words in a row are easy to keep in mind and hard to guess."
      value={value}
      error={error}
      onChange={(event) => onValueChange(event.target.value)}
    />
  );
}
