import { Check, Copy } from 'lucide-react';
import { useEffect, useState } from 'react';
import { showToast } from '../lib/toasts';
import { Button } from './button';
import { IconButton } from './icon-button';

async function copyText(text: string): Promise<boolean> {
  try {
    await navigator.clipboard.writeText(text);
    return true;
  } catch {
    showToast('problem', 'The browser does not allow copying here. Select the text and copy it by hand.');
    return false;
  }
}

/** Copies a text; says so for a moment. With `isIconOnly` the label is a hint. */
export function CopyButton({ text, label, isIconOnly = false }: { text: string; label: string; isIconOnly?: boolean }) {
  const [isCopied, setIsCopied] = useState(false);
  useEffect(() => {
    if (!isCopied) return undefined;
    const timer = setTimeout(() => setIsCopied(false), 2000);
    return () => clearTimeout(timer);
  }, [isCopied]);
  const Icon = isCopied ? Check : Copy;
  const onClick = () => void copyText(text).then(setIsCopied);
  if (isIconOnly) return <IconButton label={isCopied ? 'Copied' : label} icon={<Icon className="size-4" />} onClick={onClick} />;
  return (
    <Button size="small" icon={<Icon aria-hidden="true" className="size-3.5" />} onClick={onClick}>
      {isCopied ? 'Copied' : label}
    </Button>
  );
}
