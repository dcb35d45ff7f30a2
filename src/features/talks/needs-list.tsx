import type { Stage } from '@shared/features/talks/talks-stay.contract';
import { roomFeatures, type RoomFeature } from '@shared/features/events/events.contract';
import { Checkbox } from '@/components/field';

/** What a room offers, and what a speaker asks for, in words. */
export const featureNames: Record<RoomFeature, { offer: string; need: string }> = {
  blackboard: { offer: 'Blackboard', need: 'A blackboard' },
  projector: { offer: 'Screen', need: 'A screen for slides' },
  camera: { offer: 'Document camera', need: 'A document camera' },
  recording: { offer: 'Recording', need: 'A room that can record' },
  hearingLoop: { offer: 'Hearing loop', need: 'A hearing loop' },
  stepFree: { offer: 'Step-free', need: 'A step-free way to the desk' },
  remoteLink: { offer: 'Link to people elsewhere', need: 'A link to people elsewhere' },
};

export function NeedsList({
  needs,
  onChange,
  disabled,
}: {
  needs: RoomFeature[];
  onChange: (needs: RoomFeature[]) => void;
  disabled?: boolean;
}) {
  return (
    <fieldset>
      <legend className="mb-1 font-semibold">You need</legend>
      <div className="grid gap-1 border-t border-ink pt-2">
        {roomFeatures.map((feature) => (
          <Checkbox
            key={feature}
            label={featureNames[feature].need}
            checked={needs.includes(feature)}
            disabled={disabled}
            onChange={(event) =>
              onChange(
                event.target.checked ? [...needs, feature] : needs.filter((other) => other !== feature),
              )
            }
          />
        ))}
      </div>
    </fieldset>
  );
}

/** Rooms side by side; what is asked for and missing in a room is said in the cell. */
export function RoomsTable({ rooms, needs }: { rooms: Stage['rooms']; needs: readonly RoomFeature[] }) {
  if (rooms.length === 0) return null;
  const shown = roomFeatures.filter(
    (feature) => needs.includes(feature) || rooms.some((room) => room.features.includes(feature)),
  );
  return (
    <section>
      <h2 className="mb-1 font-semibold">What the rooms offer</h2>
      <div className="overflow-x-auto">
        <table className="ruled text-dense">
          <thead>
            <tr>
              <th scope="col">
                <span className="sr-only">Feature</span>
              </th>
              {rooms.map((room) => (
                <th key={room.name} scope="col" className="num" title={room.name}>
                  {room.shortName}
                </th>
              ))}
            </tr>
          </thead>
          <tbody className="[&_th]:border-rule! [&_th]:font-normal! [&_tr:last-child>th]:border-b-0!">
            <tr>
              <th scope="row">Seats</th>
              {rooms.map((room) => (
                <td key={room.name} className="num">
                  {room.capacity}
                </td>
              ))}
            </tr>
            {shown.map((feature) => (
              <tr key={feature}>
                <th scope="row">{featureNames[feature].offer}</th>
                {rooms.map((room) => {
                  const there = room.features.includes(feature);
                  const lacks = !there && needs.includes(feature);
                  return (
                    <td key={room.name} className={`num ${lacks ? 'font-semibold text-caution' : ''}`}>
                      {there ? 'yes' : lacks ? 'no ◇' : 'no'}
                    </td>
                  );
                })}
              </tr>
            ))}
          </tbody>
        </table>
      </div>
    </section>
  );
}
