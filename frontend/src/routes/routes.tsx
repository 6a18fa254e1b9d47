/** Which address shows which screen; each is loaded when it is first opened. */
import { createBrowserRouter, Navigate } from 'react-router-dom';
import { useSession } from '../api/session';
import { usePlaces } from '../features/frame/rail';
import { Frame } from '../features/frame/frame';
import { NotFound } from './not-found/not-found';
import { PageFailed } from './not-found/page-failed';
import { SignIn } from './sign-in/sign-in';

function Home() {
  const { user } = useSession();
  const places = usePlaces();
  return <Navigate to={user?.roles.includes('administrator') === true && places[0] === undefined ? '/people' : (places[0]?.to ?? '/worklist')} replace />;
}

export const router = createBrowserRouter([
  { path: '/sign-in', element: <SignIn />, errorElement: <PageFailed /> },
  { path: '/verify/:number?', errorElement: <PageFailed />, lazy: async () => ({ Component: (await import('./verify/verify')).Verify }) },
  {
    element: <Frame />, errorElement: <PageFailed />,
    children: [
      { path: '/', element: <Home /> },
      { path: '/worklist', lazy: async () => ({ Component: (await import('./worklist/worklist')).Worklist }) },
      { path: '/orders', lazy: async () => ({ Component: (await import('./orders/orders')).Orders }) },
      { path: '/orders/:id', lazy: async () => ({ Component: (await import('./order/order')).OrderPage }) },
      { path: '/specimens', lazy: async () => ({ Component: (await import('./specimens/specimens')).Specimens }) },
      { path: '/specimens/:id', lazy: async () => ({ Component: (await import('./specimen/specimen')).SpecimenPage }) },
      { path: '/specimens/:id/label', lazy: async () => ({ Component: (await import('./specimen/label')).Label }) },
      { path: '/specimens/:id/record-run', lazy: async () => ({ Component: (await import('./record-run/record-run')).RecordRun }) },
      { path: '/runs/:id', lazy: async () => ({ Component: (await import('./run/run')).RunPage }) },
      { path: '/determinations', lazy: async () => ({ Component: (await import('./determinations/determinations')).Determinations }) },
      { path: '/determinations/:id', lazy: async () => ({ Component: (await import('./determination/determination')).DeterminationPage }) },
      { path: '/reviews/:id', lazy: async () => ({ Component: (await import('./review/review')).Review }) },
      { path: '/certificates', lazy: async () => ({ Component: (await import('./certificates/certificates')).Certificates }) },
      { path: '/certificates/:id', lazy: async () => ({ Component: (await import('./certificate/certificate')).CertificatePage }) },
      { path: '/instruments', lazy: async () => ({ Component: (await import('./instruments/instruments')).Instruments }) },
      { path: '/instruments/:id', lazy: async () => ({ Component: (await import('./instrument/instrument')).InstrumentPage }) },
      { path: '/methods', lazy: async () => ({ Component: (await import('./methods/methods')).Methods }) },
      { path: '/reference-checks', lazy: async () => ({ Component: (await import('./reference-checks/reference-checks')).ReferenceChecks }) },
      { path: '/people', lazy: async () => ({ Component: (await import('./people/people')).People }) },
      { path: '/record', lazy: async () => ({ Component: (await import('./record/record')).RecordPage }) },
      { path: '/my-orders', lazy: async () => ({ Component: (await import('./my-orders/my-orders')).MyOrders }) },
      { path: '/my-orders/:id', lazy: async () => ({ Component: (await import('./my-orders/my-order')).MyOrder }) },
      { path: '/request-a-test', lazy: async () => ({ Component: (await import('./request-a-test/request-a-test')).RequestATest }) },
      { path: '/my-certificates', lazy: async () => ({ Component: (await import('./certificates/certificates')).Certificates }) },
      { path: '*', element: <NotFound /> },
    ],
  },
]);
