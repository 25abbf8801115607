import { flushPromises, mount } from '@vue/test-utils';
import { readFileSync } from 'node:fs';
import { afterEach, describe, expect, it, vi } from 'vitest';
import TraceDialog from '@/components/runs/TraceDialog.vue';
import { placeWords } from '@/components/runs/trace-words.ts';
import { clockOfDraft, placeDraft } from '@/composables/runs/trace-draft.ts';
import { sendTrace } from '@/api/traces.ts';
import { ProblemError } from '@/api/problem-error.ts';

vi.mock('@/api/traces.ts', () => ({ sendTrace: vi.fn() }));
vi.mock('@/components/recordings/usePlot.ts', () => ({ usePlot: () => undefined }));
afterEach(() => vi.mocked(sendTrace).mockReset());

const recordings = [{ id: 'rec', fileName: 'coldstage.wav', spans: [{ startNs: 2e9, endNs: 32e9 }] }];
const plain = (text: string) => text.replace(/[\u00A0\u202F]/g, ' ');

async function openWith(text: string, name = 'stage_17.csv') {
  const wrapper = mount(TraceDialog, {
    props: { isOpen: false, runId: 'run', startedAt: '2026-03-02T13:10:00.000Z', recordings },
    attachTo: document.body,
  });
  await wrapper.setProps({ isOpen: true });
  if (text !== '') {
    const field = wrapper.find('input[type=file]');
    Object.defineProperty(field.element, 'files', { value: [new File([text], name)], configurable: true });
    await field.trigger('change');
    await settle();
  }
  return wrapper;
}

/** Files are read by the document's own tasks, which promises alone do not wait for. */
async function settle(): Promise<void> {
  for (let n = 0; n < 20; n++) {
    await new Promise((resolve) => setTimeout(resolve, 0));
    await flushPromises();
  }
}

describe('adding a trace', () => {
  it('asks for a table before anything is sent', async () => {
    const wrapper = await openWith('');
    await wrapper.find('form').trigger('submit');
    expect(wrapper.text()).toContain('Choose a table first.');
    expect(sendTrace).not.toHaveBeenCalled();
    wrapper.unmount();
  });

  it('sends what it found in the file of a logger, placed on the clock of the run', async () => {
    const trace = { id: 'new', name: 'stage 17', notes: [] };
    vi.mocked(sendTrace).mockResolvedValue(trace as never);
    const wrapper = await openWith(readFileSync('fixtures/traces/logger.csv', 'utf8'));
    expect(plain(wrapper.text())).toContain('501 rows over 1 min 40 s');
    const start = wrapper
      .findAll('input[type=text]')
      .find((field) => field.attributes('inputmode') === 'decimal');
    await start?.setValue('-2.5');
    expect(plain(wrapper.text())).toContain("The trace starts 2.5 s before the run's zero.");
    await wrapper.find('form').trigger('submit');
    await settle();
    expect(vi.mocked(sendTrace).mock.calls[0]?.[2]).toEqual({
      name: 'stage 17',
      quantity: 'temperature',
      mapping: {
        separator: 'semicolon',
        decimal: 'comma',
        timeColumn: 0,
        timeUnit: 's',
        valueColumn: 1,
        unit: '°C',
      },
      runOffsetNs: -2.5e9,
      clockPpm: 0,
    });
    expect(wrapper.emitted('added')).toEqual([[trace]]);
    wrapper.unmount();
  });

  it('says what is wrong with a table and sends nothing', async () => {
    const wrapper = await openWith('t (s),T (°C)\n0,1\n5,2\n4,3\n');
    expect(wrapper.text()).toContain('Line 4 goes back in time');
    await wrapper.find('form').trigger('submit');
    expect(sendTrace).not.toHaveBeenCalled();
    wrapper.unmount();
  });

  it('asks for a unit where the table tells none', async () => {
    const wrapper = await openWith('0,1\n1,2\n2,1\n');
    await wrapper.find('form').trigger('submit');
    await settle();
    expect(wrapper.text()).toContain('Unit of the values is needed.');
    expect(sendTrace).not.toHaveBeenCalled();
    wrapper.unmount();
  });

  it('offers the dates of the table where the run tells when it began', async () => {
    const wrapper = await openWith('time,T (°C)\n2026-03-02T13:09:50Z,1\n2026-03-02T13:09:51Z,0\n');
    await wrapper.find('input[type=radio][value=clock]').setValue();
    expect(plain(wrapper.text())).toContain("The trace starts 10 s before the run's zero.");
    wrapper.unmount();
  });

  it('keeps everything when the server refuses it, with the reason', async () => {
    const problem = new ProblemError({
      type: 'about:blank',
      title: 'The file was refused',
      status: 422,
      detail: 'Line 9 goes back in time.',
      code: 'file-refused',
      requestId: '',
      fields: [],
    });
    vi.mocked(sendTrace).mockRejectedValue(problem);
    const wrapper = await openWith('t (s),T (°C)\n0,1\n1,2\n');
    await wrapper.find('form').trigger('submit');
    await settle();
    expect(wrapper.text()).toContain('Line 9 goes back in time.');
    expect(wrapper.text()).toContain('stage_17.csv');
    expect(wrapper.emitted('added')).toBeUndefined();
    wrapper.unmount();
  });

  it('stops sending without a word of failure', async () => {
    vi.mocked(sendTrace).mockImplementation(
      (_run, _file, _trace, { signal }) =>
        new Promise((_resolve, reject) =>
          signal.addEventListener('abort', () => reject(new DOMException('Stopped.', 'AbortError'))),
        ),
    );
    const wrapper = await openWith('t (s),T (°C)\n0,1\n1,2\n');
    await wrapper.find('form').trigger('submit');
    await settle();
    await wrapper
      .findAll('button')
      .find((button) => button.text() === 'Stop sending')
      ?.trigger('click');
    await settle();
    expect(wrapper.find('[role=alert]').exists()).toBe(false);
    expect(wrapper.text()).not.toContain('Stop sending');
    wrapper.unmount();
  });
});

describe('the place of a trace', () => {
  const known = { recordings, byClockNs: null };
  const marked = (first: object, second: object = {}) => {
    const draft = placeDraft({ runOffsetNs: 0, clockPpm: 0 }, recordings);
    Object.assign(draft.first, first);
    Object.assign(draft.second, second);
    return clockOfDraft({ ...draft, way: 'marks' }, known);
  };

  it('comes from an instant in the trace and in a recording, which begins after the zero', () => {
    expect(marked({ traceS: 12, soundS: 9 })).toEqual({ runOffsetNs: -1e9, clockPpm: 0 });
    expect(marked({ traceS: 0, soundS: 0 }, { traceS: 10.0002, soundS: 10 })).toMatchObject({
      runOffsetNs: 2e9,
      clockPpm: expect.closeTo(20, 3),
    });
  });

  it('says what is missing', () => {
    expect(marked({ traceS: 12 })).toBe('Say when the instant is in the trace and in the recording.');
    const untold = { ...placeDraft({ runOffsetNs: 0, clockPpm: 0 }, []), startS: null };
    expect(clockOfDraft(untold, known)).toBe('Say at which run time the first row stands.');
  });

  it('is told in words', () => {
    expect(plain(placeWords({ runOffsetNs: 0, clockPpm: 0 }))).toBe("starts at the run's zero");
    expect(plain(placeWords({ runOffsetNs: 250e6, clockPpm: -20.4 }))).toBe(
      "starts 250 ms after the run's zero, its clock 20 ppm slow",
    );
  });
});
