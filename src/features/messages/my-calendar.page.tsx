import { useQuery } from '@tanstack/react-query';
import { Button } from '@/components/button';
import { Input } from '@/components/field';
import { QueryView } from '@/components/states';
import { toast } from '@/components/toast';
import { sayFailure } from '@/lib/problem';
import { myFeedQuery, useRenewFeed } from './messages.queries';

/** The address of one's own feed, for a calendar program to subscribe to. */
export function Component() {
  const query = useQuery(myFeedQuery);
  const renew = useRenewFeed();
  return (
    <div className="mx-auto max-w-[640px] px-4 py-10 text-form">
      <h1 className="font-serif text-page">My calendar</h1>
      <p className="mt-2 text-ink2">
        Everything that you give, teach or chair, in every event. Subscribe to this address in your calendar
        program; it follows each change by itself.
      </p>
      <div className="mt-6">
        <QueryView query={query} what="your address">
          {({ url }) => (
            <div className="grid gap-4">
              <Input
                label="Address to subscribe to"
                readOnly
                value={url}
                onFocus={(e) => e.target.select()}
                hint="Whoever has this address can read your times and rooms. Keep it to yourself."
              />
              <div className="flex flex-wrap gap-2.5">
                <Button
                  sizing="form"
                  onClick={() =>
                    navigator.clipboard.writeText(url).then(
                      () => toast('Address copied.'),
                      () => toast('It could not be copied. Mark it and copy it by hand.', { kind: 'wrong' }),
                    )
                  }
                >
                  Copy the address
                </Button>
                <Button
                  sizing="form"
                  busy={renew.isPending}
                  onClick={() =>
                    renew.mutate(undefined, {
                      onSuccess: () => toast('New address made. The old one has ended.'),
                      onError: sayFailure,
                    })
                  }
                >
                  Make a new address, end this one
                </Button>
              </div>
            </div>
          )}
        </QueryView>
      </div>
    </div>
  );
}
