import { LoadingState } from '../../../components/states';

export function Component() {
  return <LoadingState label="Evidence" />;
}
