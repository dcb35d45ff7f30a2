import { useId, useRef, useState, type DragEvent } from 'react';
import type { Material, materialKinds, Talk } from '@shared/features/talks/talks.contract';
import { downloadMaterial, MAX_UPLOAD } from '@shared/features/talks/talks-materials.contract';
import { Button } from '@/components/button';
import { fileAddress } from '@/lib/api';
import { formatBytes, ownTime } from '@/lib/format';
import { MaterialAccess } from './material-access';
import { materialNames, typeWords } from './material-words';
import { useMaterialUpload, type Travelling } from './use-upload';

/** One kind of material of a talk: versions newest first, upload by choosing or dropping, who may see it. */
export function MaterialsPanel({
  talk,
  kind,
  wantedBy,
}: {
  talk: Talk;
  kind: (typeof materialKinds)[number];
  wantedBy?: string;
}) {
  const { start, stop, travelling, error } = useMaterialUpload(talk, kind);
  const [over, setOver] = useState(false);
  const input = useRef<HTMLInputElement>(null);
  const inputId = useId();
  const material = talk.materials.find((entry) => entry.kind === kind);
  const versions = material?.versions ?? [];
  const drop = (event: DragEvent) => {
    event.preventDefault();
    setOver(false);
    const file = event.dataTransfer.files[0];
    if (file && !travelling) start(file);
  };
  return (
    <section
      onDragOver={(event) => {
        if (!talk.can.upload) return;
        event.preventDefault();
        setOver(true);
      }}
      onDragLeave={() => setOver(false)}
      onDrop={talk.can.upload ? drop : undefined}
      className={over ? 'outline-2 outline-offset-4 outline-act outline-dashed' : ''}
    >
      <div className="mb-1 flex flex-wrap items-baseline justify-between gap-x-3">
        <h2 className="font-semibold">{materialNames[kind].title}</h2>
        <span className="text-dense text-ink3">
          {materialNames[kind].hint}, up to {formatBytes(MAX_UPLOAD)}
          {wantedBy && `; ${wantedBy}`}
        </span>
      </div>
      <ol className="border-y border-ink text-dense">
        {travelling && <Progress upload={travelling} number={(versions[0]?.number ?? 0) + 1} onStop={stop} />}
        {versions.map((version, index) => (
          <Version key={version.id} talk={talk} version={version} shown={index === 0} />
        ))}
        {versions.length === 0 && !travelling && <li className="py-2 text-ink3">Nothing uploaded yet.</li>}
      </ol>
      {error && (
        <p role="alert" className="mt-1 text-dense font-semibold text-alarm">
          {error}
        </p>
      )}
      {talk.can.upload && (
        <div className="mt-2 flex flex-wrap items-center gap-3">
          <label htmlFor={inputId} className="sr-only">
            {materialNames[kind].title}: file
          </label>
          <input
            id={inputId}
            ref={input}
            type="file"
            className="sr-only"
            tabIndex={-1}
            accept=".pdf,.pptx,.odp,.key,.zip,.png,.jpg,.jpeg"
            onChange={(event) => {
              const file = event.target.files?.[0];
              event.target.value = '';
              if (file) start(file);
            }}
          />
          <Button
            sizing="dense"
            className="max-sm:min-h-[44px]"
            disabled={Boolean(travelling)}
            onClick={() => input.current?.click()}
          >
            Choose a file
          </Button>
          <span className="text-dense text-ink2">or drop it here. Old versions stay.</span>
        </div>
      )}
      {material && talk.can.upload && (
        <MaterialAccess key={material.version} talk={talk} material={material} />
      )}
    </section>
  );
}

function Version({
  talk,
  version,
  shown,
}: {
  talk: Talk;
  version: Material['versions'][number];
  shown: boolean;
}) {
  return (
    <li className="flex gap-3 border-b border-rule py-1.5 last:border-b-0">
      <b className="w-6 shrink-0 font-semibold">{version.number}</b>
      <div className="min-w-0 grow">
        <p>
          <a
            className="font-semibold break-all"
            href={fileAddress(downloadMaterial, { event: talk.eventSlug, file: version.id })}
          >
            {version.fileName}
          </a>{' '}
          <span className="text-ink3">
            {formatBytes(version.bytes)}, {ownTime(version.uploadedAt)}, {version.uploadedBy}
          </span>
        </p>
        <p className="text-good">
          ✓ {typeWords(version.type)} by its content{' '}
          <span className="text-ink3" title={`SHA-256 ${version.sha256}`}>
            checksum {version.sha256.slice(0, 8)}
          </span>
        </p>
      </div>
      {shown && <b className="font-semibold">shown</b>}
    </li>
  );
}

function Progress({ upload, number, onStop }: { upload: Travelling; number: number; onStop: () => void }) {
  const percent = Math.round(upload.share * 100);
  return (
    <li className="flex gap-3 border-b border-rule py-1.5 last:border-b-0">
      <b className="w-6 shrink-0 font-semibold">{number}</b>
      <div className="min-w-0 grow">
        <p className="font-semibold break-all">{upload.name}</p>
        <div className="mt-1 flex flex-wrap items-center gap-3">
          <div
            role="progressbar"
            aria-label={`Uploading ${upload.name}`}
            aria-valuemin={0}
            aria-valuemax={100}
            aria-valuenow={percent}
            className="h-2.5 w-48 max-w-full border border-rule bg-wash"
          >
            <div className="h-full bg-act" style={{ width: `${percent}%` }} />
          </div>
          <span className="text-ink2">
            {percent === 100
              ? 'Checking the file …'
              : `${formatBytes(upload.bytes * upload.share)} of ${formatBytes(upload.bytes)}`}
          </span>
        </div>
      </div>
      <Button variant="link" onClick={onStop}>
        Stop
      </Button>
    </li>
  );
}
