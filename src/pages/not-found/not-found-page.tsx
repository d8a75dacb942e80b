import { Link } from 'react-router-dom';
import { PageHead } from '../../components/layout/page-head.tsx';

export function NotFoundPage() {
  return (
    <>
      <PageHead title="No such page" />
      <p className="mt-3 max-w-[560px] text-verdict">
        Nothing is kept under this address, or it belongs to a lab that you aren’t in.
      </p>
      <p className="mt-3">
        <Link className="link" to="/captures">
          Go to the captures
        </Link>
      </p>
    </>
  );
}
