import { useNavigate, useParams } from 'react-router-dom';
import { Button } from '@/components/button';
import { sentenceOf } from '@/lib/problem';
import { useVerify } from './accounts.queries';
import { Narrow } from './narrow';

/** A press, not the mere opening: mail programs open links by themselves. */
export function Component() {
  const { token = '' } = useParams();
  const verify = useVerify();
  const navigate = useNavigate();
  return (
    <Narrow title="Confirm your address" lead="This opens your account and signs you in.">
      <Button
        variant="primary"
        sizing="form"
        busy={verify.isPending}
        onClick={() => verify.mutate(token, { onSuccess: () => void navigate('/home', { replace: true }) })}
      >
        Confirm the address
      </Button>
      {verify.error && (
        <p role="alert" className="mt-4 font-semibold text-alarm">
          {sentenceOf(verify.error)}
        </p>
      )}
    </Narrow>
  );
}
