import { mount } from '@vue/test-utils';
import { describe, expect, it } from 'vitest';
import { createMemoryHistory, createRouter } from 'vue-router';
import { licenceSchema } from '@shared/contract/licence.ts';
import { sensitivitySchema } from '@shared/contract/recordings.ts';
import UploadList from '@/components/uploads/UploadList.vue';
import { licenceOptions, sensitivityOptions } from '@/components/uploads/declaration-options.ts';
import { personalWarning, progressWords } from '@/components/uploads/upload-words.ts';
import { declarationFormSchema, emptyDeclaration } from '@/composables/uploads/declaration-form.ts';
import { createTransferRate, secondsLeft } from '@/composables/uploads/transfer-rate.ts';
import { failureOf } from '@/composables/uploads/upload-failure.ts';
import { newUploadItem } from '@/composables/uploads/upload-item.ts';
import type { UploadItem } from '@/composables/uploads/upload-item.ts';
import { uploadNews } from '@/composables/uploads/upload-news.ts';
import { routes } from '@/router/routes.ts';
import { format } from '../recordings/recording-fixture.ts';

const router = createRouter({ history: createMemoryHistory(), routes });

function item(part: Partial<UploadItem> = {}): UploadItem {
  return { ...newUploadItem('1', { fileName: 'film-07.wav', sizeBytes: 100_000_000 }), ...part };
}

function plain(text: string): string {
  return text.replace(/[\u00A0\u202F]/g, ' ');
}

describe('the speed of a transfer', () => {
  it('is said once there is enough to say', () => {
    const rate = createTransferRate();
    expect(rate.add(0, 0)).toBeNull();
    expect(rate.add(1000, 100)).toBeNull();
    expect(rate.add(20_000, 2000)).toBe(10_000);
  });

  it('forgets what was long ago', () => {
    const rate = createTransferRate();
    rate.add(0, 0);
    rate.add(1_000_000, 1000);
    rate.add(1_000_000, 9500);
    expect(rate.add(1_010_000, 10_500)).toBe(10_000);
  });

  it('tells the time left, and nothing while it stands still', () => {
    expect(secondsLeft(30_000, 10_000)).toBe(3);
    expect(secondsLeft(30_000, 0)).toBeNull();
    expect(secondsLeft(30_000, null)).toBeNull();
  });
});

describe('an upload in words', () => {
  it('has sizes, speed and time left', () => {
    const sending = item({ stage: 'sending', sentBytes: 40_000_000, bytesPerSecond: 2_000_000 });
    expect(plain(progressWords(sending))).toBe('40 MB of 100 MB, 2 MB/s, 30 s left');
    expect(plain(progressWords({ ...sending, bytesPerSecond: 50_000 }))).toContain('20 min left');
  });

  it('warns of a name in the header before a byte is sent', () => {
    const finding = {
      chunk: 'bext',
      key: 'Originator',
      value: 'M.',
      kind: 'person' as const,
      sentence: 'S.',
    };
    expect(personalWarning({ format, findings: [finding] })).toBe(
      'This file names a person in its header: a reviewer will have to look at it before it can be shared.',
    );
    expect(personalWarning({ format, findings: [{ ...finding, kind: 'free-text' }] })).toContain(
      'could name',
    );
    expect(personalWarning({ format, findings: [] })).toBe('');
  });

  it('tells a fault of the connection from one that a person has to mend', () => {
    expect(failureOf(0, '')).toMatchObject({ stage: 'lost', retriesItself: true });
    expect(failureOf(503, '')).toMatchObject({ stage: 'lost', retriesItself: true });
    expect(failureOf(507, '')).toMatchObject({ stage: 'lost', retriesItself: false });
    expect(failureOf(410, 'This upload is expired.')).toMatchObject({
      stage: 'failed',
      message: 'This upload is expired.',
    });
  });
});

describe('news of uploads for screen readers', () => {
  it('come at quarters, not at each percent', () => {
    const before = item({ stage: 'sending', sentBytes: 10_000_000 });
    expect(uploadNews([before], [{ ...before, sentBytes: 20_000_000 }])).toBe('');
    expect(uploadNews([before], [{ ...before, sentBytes: 51_000_000 }])).toBe('film-07.wav: 50 % sent');
  });

  it('say why a file was refused', () => {
    const refused = item({ stage: 'refused', message: 'This is an MP3 file.' });
    expect(uploadNews([item()], [refused])).toBe('film-07.wav refused: This is an MP3 file.');
  });
});

describe('the declaration', () => {
  it('offers every licence and every reason of sensitivity', () => {
    expect(licenceOptions.map(({ value }) => value)).toEqual(licenceSchema.options);
    expect(sensitivityOptions.map(({ value }) => value)).toEqual(sensitivitySchema.options);
  });

  it('puts the place on the clock of the run into nanoseconds', () => {
    const setupId = '019a0000-0000-7000-8000-000000000001';
    const draft = { ...emptyDeclaration('CC0-1.0'), setupId, runOffsetS: 1.25 };
    expect(declarationFormSchema.parse(draft)).toMatchObject({
      runOffsetNs: 1_250_000_000,
      timeExpansion: 1,
    });
  });

  it('is not whole without set-up and licence', () => {
    const parsed = declarationFormSchema.safeParse(emptyDeclaration(''));
    const paths = parsed.error?.issues.map(({ path }) => path.join('.'));
    expect(paths).toEqual(['setupId', 'licence']);
  });
});

describe('the list of uploads', () => {
  function mountList(...items: UploadItem[]) {
    return mount(UploadList, {
      props: { items, timeExpansion: 1, label: 'Files' },
      global: { plugins: [router] },
    });
  }

  it('names the file on every button', () => {
    const wrapper = mountList(item({ stage: 'sending', sentBytes: 1 }));
    const names = wrapper.findAll('button').map((button) => button.attributes('aria-label'));
    expect(names).toEqual(['Pause film-07.wav', 'Cancel film-07.wav']);
  });

  it('asks for the same file again after a reload', () => {
    const wrapper = mountList(item({ stage: 'missing', sentBytes: 40_000_000 }));
    expect(wrapper.text()).toContain('Choose the same file again to go on');
    expect(wrapper.find('[role="progressbar"]').attributes('aria-valuenow')).toBe('40');
  });

  it('leads to the recording once there is one', () => {
    const wrapper = mountList(item({ stage: 'measured', recordingId: 'r1' }));
    expect(wrapper.find('a').attributes('href')).toBe('/recordings/r1');
  });

  it('warns of a rate at which no ultrasound can be seen, in time', () => {
    const low = { format: { ...format, sampleRateHz: 44_100 }, findings: [] };
    expect(mountList(item({ stage: 'ready', reading: low })).text()).toContain('record at 96 kHz or more');
    const high = { format, findings: [] };
    expect(mountList(item({ stage: 'ready', reading: high })).text()).not.toContain('96 kHz');
  });
});
