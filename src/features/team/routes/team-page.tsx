import { Outlet } from 'react-router-dom';

export function Component() {
  return <Outlet />;
}
