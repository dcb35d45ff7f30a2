import { useState } from 'react';
import {
  roomFeatures,
  type EventDetail,
  type RoomFeature,
  type RoomInput,
} from '@shared/features/events/events.contract';
import { Button } from '@/components/button';
import { Checkbox, Input } from '@/components/field';
import { Note } from '@/components/states';
import { toast } from '@/components/toast';
import { fieldErrors, sentenceOf } from '@/lib/problem';
import { useReplaceRooms } from './events.queries';

export const featureNames: Record<RoomFeature, string> = {
  blackboard: 'Blackboards',
  projector: 'Projector',
  camera: 'Document camera',
  recording: 'Recording',
  hearingLoop: 'Hearing loop',
  stepFree: 'Step-free',
  remoteLink: 'Remote link',
};

/** Rooms in their order: name, seats, what they offer. */
export function RoomsEditor({ event }: { event: EventDetail }) {
  const [rooms, setRooms] = useState<RoomInput[]>(() =>
    event.rooms.map(({ id, name, shortName, capacity, features }) => ({
      id,
      name,
      shortName,
      capacity,
      features,
    })),
  );
  const save = useReplaceRooms(event.slug);
  const errors = fieldErrors(save.error);
  const put = (index: number, change: Partial<RoomInput>) =>
    setRooms(rooms.map((room, i) => (i === index ? { ...room, ...change } : room)));
  const add = () => setRooms([...rooms, { name: '', shortName: '', capacity: 30, features: ['blackboard'] }]);
  return (
    <form
      noValidate
      className="max-w-[980px]"
      onSubmit={(e) => {
        e.preventDefault();
        save.mutate(
          { version: event.version, rooms },
          {
            onSuccess: (saved) => {
              setRooms(
                saved.rooms.map(({ id, name, shortName, capacity, features }) => ({
                  id,
                  name,
                  shortName,
                  capacity,
                  features,
                })),
              );
              toast('Rooms saved.');
            },
          },
        );
      }}
    >
      <Note>
        The number of seats must be the one that the local fire authority permits. Analemma warns when a talk
        expects more; the safety officer of the institute decides.
      </Note>
      {rooms.length === 0 && <p className="mt-6 font-serif text-[18px]">No rooms yet.</p>}
      {rooms.map((room, index) => (
        <fieldset
          key={room.id ?? index}
          className="mt-5 grid grid-cols-[1.4fr_0.7fr_0.6fr_auto] items-start gap-3 border-t border-ink pt-3 max-sm:grid-cols-2"
        >
          <legend className="sr-only">Room {index + 1}</legend>
          <Input
            dense
            label="Name"
            value={room.name}
            onChange={(e) => put(index, { name: e.target.value })}
            error={errors[`rooms.${index}.name`]}
          />
          <Input
            dense
            label="Short name"
            value={room.shortName}
            onChange={(e) => put(index, { shortName: e.target.value })}
            error={errors[`rooms.${index}.shortName`]}
            hint="On tiles"
          />
          <Input
            dense
            label="Seats"
            type="number"
            min={1}
            value={room.capacity || ''}
            onChange={(e) => put(index, { capacity: Number(e.target.value) })}
            error={errors[`rooms.${index}.capacity`]}
          />
          <Button
            variant="link"
            className="mt-6"
            aria-label={`Remove ${room.name || 'this room'}`}
            onClick={() => setRooms(rooms.filter((_r, i) => i !== index))}
          >
            Remove
          </Button>
          <div className="col-span-full flex flex-wrap gap-x-5">
            {roomFeatures.map((feature) => (
              <Checkbox
                key={feature}
                label={featureNames[feature]}
                checked={room.features.includes(feature)}
                onChange={(e) =>
                  put(index, {
                    features: e.target.checked
                      ? [...room.features, feature]
                      : room.features.filter((f) => f !== feature),
                  })
                }
              />
            ))}
          </div>
        </fieldset>
      ))}
      {errors.rooms && (
        <p role="alert" className="mt-3 font-semibold text-alarm">
          {errors.rooms}
        </p>
      )}
      {save.error && Object.keys(errors).length === 0 && (
        <p role="alert" className="mt-3 font-semibold text-alarm">
          {sentenceOf(save.error)}
        </p>
      )}
      <div className="mt-6 flex gap-2">
        <Button type="submit" variant="primary" busy={save.isPending}>
          Save the rooms
        </Button>
        <Button onClick={add}>Add a room</Button>
      </div>
    </form>
  );
}
