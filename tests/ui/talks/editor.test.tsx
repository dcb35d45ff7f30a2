import { QueryClient, QueryClientProvider } from '@tanstack/react-query';
import { render, screen } from '@testing-library/react';
import userEvent from '@testing-library/user-event';
import { useState } from 'react';
import { describe, expect, it, vi } from 'vitest';
import type { Talk } from '@shared/features/talks/talks.contract';
import { MAX_UPLOAD } from '@shared/features/talks/talks-materials.contract';
import { AbstractSource, colouredLines } from '@/features/talks/abstract-source';
import { MathLine, MathText } from '@/components/math-text';
import { MaterialsPanel } from '@/features/talks/materials-panel';
import { ReferencesField } from '@/features/talks/references-field';
import { SubjectsField } from '@/features/talks/subjects-field';
import { useAbstractProblems } from '@/features/talks/use-abstract-problems';

function Editor({ initial = '' }: { initial?: string }) {
  const [value, setValue] = useState(initial);
  const { problems, marks } = useAbstractProblems(value);
  return (
    <>
      <AbstractSource value={value} marks={marks} problems={problems} onChange={setValue} />
      <MathText source={value} />
    </>
  );
}

describe('the abstract', () => {
  it('names line, command and remedy, tied to the field, and marks it in the print', async () => {
    render(<Editor initial={'One\n\nthree'} />);
    const field = screen.getByLabelText('Abstract, LaTeX');
    expect(field.getAttribute('aria-invalid')).toBeNull();
    await userEvent.type(field, ' \\textsc{{hand}');
    const said = document.getElementById(field.getAttribute('aria-describedby') ?? '');
    expect(said?.textContent).toBe(
      'Line 3: \\textsc is not known here. Use \\emph, or write the word plainly.',
    );
    expect(screen.getByTitle('Not known here').textContent).toBe('\\textsc{hand}');
  });

  it('names a formula that can’t be set, with its line', async () => {
    render(<Editor initial={'One\n$\\foo$'} />);
    expect(await screen.findByText(/Undefined control sequence: \\foo/)).toBeTruthy();
    expect(screen.getByText('Line 2:')).toBeTruthy();
  });

  it('shows mathematics with a form for readers, and text as text', async () => {
    const { container } = render(<MathText source={'Let $x^2$ be <b>bold</b> and \\emph{so}.'} />);
    await vi.waitFor(() => expect(container.querySelector('.katex math')).not.toBeNull());
    expect(container.querySelector('b')).toBeNull();
    expect(container.textContent).toContain('<b>bold</b>');
    expect(container.querySelector('em')?.textContent).toBe('so');
  });

  it('sets a title in one line, displayed formulas too', async () => {
    const { container } = render(<MathLine source={'On \\[h^*\\]-vectors'} />);
    await vi.waitFor(() => expect(container.querySelector('.katex')).not.toBeNull());
    expect(container.querySelector('.katex-display')).toBeNull();
  });

  it('colours by lines without losing a letter', () => {
    const source = 'a $x$\n\\[y\n+z\\]\n\\nope';
    const lines = colouredLines(source, [
      { from: 2, to: 5, kind: 'math' },
      { from: 6, to: 14, kind: 'math' },
      { from: 15, to: 20, kind: 'unknown' },
    ]);
    expect(lines.map((pieces) => pieces.map((piece) => piece.text).join('')).join('\n')).toBe(source);
    expect(lines.map((pieces) => pieces.map((piece) => piece.kind))).toEqual([
      ['plain', 'math'],
      ['math'],
      ['math'],
      ['unknown'],
    ]);
  });
});

describe('subjects and references', () => {
  function Subjects() {
    const [codes, setCodes] = useState(['37E05']);
    return <SubjectsField codes={codes} onChange={setCodes} />;
  }
  it('takes codes by Enter, refuses what is none, and finds classes by words', async () => {
    render(<Subjects />);
    const field = screen.getByLabelText('Add a code');
    await userEvent.type(field, '5C15{Enter}');
    expect(screen.getByText('An MSC 2020 code looks like 05C15; this is 5C15.')).toBeTruthy();
    await userEvent.clear(field);
    await userEvent.type(field, 'discrete');
    await userEvent.click(screen.getByRole('button', { name: /52 Convex and discrete geometry/ }));
    await userEvent.type(field, 'C23{Enter}');
    expect(screen.getByText('52C23')).toBeTruthy();
    await userEvent.click(screen.getByRole('button', { name: 'Make first' }));
    expect(screen.getAllByRole('listitem').map((item) => item.textContent?.slice(0, 5))).toEqual([
      '52C23',
      '37E05',
    ]);
  });

  it('takes a DOI as an address and refuses it twice', async () => {
    const change = vi.fn();
    render(<ReferencesField references={['10.1000/xyz']} onChange={change} />);
    const field = screen.getByLabelText('Add a DOI or arXiv identifier');
    await userEvent.type(field, 'https://doi.org/10.1000/xyz{Enter}');
    expect(screen.getByText('This reference is in the list.')).toBeTruthy();
    await userEvent.clear(field);
    await userEvent.type(field, 'arXiv:2101.01234v2{Enter}');
    expect(change).toHaveBeenCalledExactlyOnceWith(['10.1000/xyz', '2101.01234v2']);
  });
});

it('a file over the limit is refused before anything is sent', async () => {
  const fetched = vi.spyOn(globalThis, 'fetch');
  const talk = {
    id: '01890000-0000-7000-8000-000000000001',
    eventSlug: 'x',
    materials: [],
    can: { upload: true },
  } as unknown as Talk;
  render(
    <QueryClientProvider client={new QueryClient()}>
      <MaterialsPanel talk={talk} kind="slides" />
    </QueryClientProvider>,
  );
  const big = new File(['x'], 'big.pdf', { type: 'application/pdf' });
  Object.defineProperty(big, 'size', { value: MAX_UPLOAD + 1 });
  await userEvent.upload(screen.getByLabelText('Slides: file'), big);
  expect(screen.getByRole('alert').textContent).toBe('big.pdf has 60.0 MB; at most 60.0 MB are taken.');
  expect(fetched).not.toHaveBeenCalled();
});
