import { PageBar } from '@/components/page-bar';
import { MessageList } from './message-list';

export function Component() {
  return (
    <>
      <PageBar title="Messages" facts="What each person was sent, in every event" />
      <div className="p-6 max-sm:p-4">
        <MessageList event={null} />
      </div>
    </>
  );
}
