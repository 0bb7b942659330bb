import { data } from 'react-router-dom';

export { RouteError as ErrorBoundary } from './route-error.tsx';

/** Every unknown address ends here and is told so inside the frame. */
export const loader = () => {
  throw data(null, { status: 404 });
};

export const Component = () => null;
