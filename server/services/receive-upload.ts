import { once } from 'node:events';
import type { IncomingMessage } from 'node:http';
import busboy from 'busboy';
import { z } from 'zod';
import type { UploadItem } from '../../shared/capture.ts';
import { SettingChanges } from '../../shared/settings.ts';
import type { Actor } from '../policies/verdict.ts';
import type { Context } from './context.ts';
import type { Gate } from './gate.ts';
import { invalid, ProblemError, refused, tooLarge } from './problems.ts';
import { applyChanges, type SettingChangeValues } from './setting-changes.ts';
import { storeFile, type IncomingFile, type UploadTarget } from './store-file.ts';

const MOST_FILES = 1000;

export interface UploadFields {
  campaignId?: string;
  settings?: SettingChangeValues;
}

const Fields = {
  campaignId: z.uuid(),
  settings: z
    .string()
    .transform((text, context) => {
      try {
        return z.unknown().parse(JSON.parse(text));
      } catch {
        context.addIssue({ code: 'custom', message: 'isn’t JSON such as {"rbwHz": 10000, "sweeps": 20}' });
        return z.NEVER;
      }
    })
    .pipe(SettingChanges),
};

function readField(fields: UploadFields, name: string, text: string): void {
  if (text === '') return;
  if (name === 'campaignId') {
    const parsed = Fields.campaignId.safeParse(text);
    if (!parsed.success) throw refused(parsed.error, 'campaignId');
    fields.campaignId = parsed.data;
  } else if (name === 'settings') {
    const parsed = Fields.settings.safeParse(text);
    if (!parsed.success) throw refused(parsed.error, 'settings');
    fields.settings = parsed.data;
  } else {
    throw invalid(`An upload has no field “${name}”; it takes files, campaignId and settings.`);
  }
}

/** The name alone, without folders and control characters. */
function cleanFileName(given: string | undefined): string {
  const name = (given ?? '').split(/[\\/]/).at(-1) ?? '';
  const printable = [...name].filter((letter) => letter >= ' ' && letter !== '\u007f').join('');
  return printable.trim().slice(0, 255) || 'unnamed';
}

export interface UploadResult {
  items: UploadItem[];
  /** Fields that came behind files, which were stored without them. */
  late: UploadFields;
}

/**
 * Receives a multipart upload, file by file as the bytes arrive. A file that can't be stored is told in its item and
 * doesn't hinder the others.
 * @param checkCampaign throws where the campaign isn't one of the lab.
 * @throws ProblemError where the request as a whole can't be used; the first file's where none could be stored.
 */
export async function receiveUpload(
  context: Context,
  gate: Gate,
  actor: Actor,
  labId: string,
  request: IncomingMessage,
  checkCampaign: (campaignId: string) => Promise<void>,
): Promise<UploadResult> {
  const fields: UploadFields = {};
  const late: UploadFields = {};
  const items: UploadItem[] = [];
  const refusals: ProblemError[] = [];
  let failure: unknown = null;
  let work: Promise<void> = Promise.resolve();
  let files = 0;
  const form = startForm(request, context.config.maxUploadBytes);

  const fail = (error: unknown) => {
    failure ??= error;
  };
  const store = async (file: IncomingFile) => {
    try {
      if (failure) return;
      const target: UploadTarget = {
        labId,
        campaignId: fields.campaignId ?? null,
        settingChanges: applyChanges({}, fields.settings ?? {}, actor, new Date()),
      };
      items.push(await storeFile(context, gate, actor, file, target));
    } catch (error) {
      if (!(error instanceof ProblemError) || error.details.status === 408) {
        fail(error);
        form.destroy();
        return;
      }
      refusals.push(error);
      items.push({ fileName: file.fileName, id: null, state: null, duplicate: false, error: error.message });
    } finally {
      file.stream.resume();
    }
  };

  form.on('field', (name, text) => {
    const part = files === 0 ? fields : late;
    work = work
      .then(async () => {
        readField(part, name, text);
        if (name === 'campaignId' && text !== '') await checkCampaign(text);
      })
      .catch(fail);
  });
  form.on('file', (_name, stream, { filename, mimeType }) => {
    files += 1;
    stream.on('error', () => {});
    const file = { fileName: cleanFileName(filename), mediaType: mimeType.slice(0, 100), stream };
    work = work.then(() => store(file));
  });
  form.on('filesLimit', () =>
    fail(tooLarge(`An upload takes ${MOST_FILES} files at most; send the others in another one.`)),
  );
  request.on('close', () => {
    if (!request.complete) form.destroy(new Error('The sender ended the upload.'));
  });
  request.pipe(form);
  await once(form, 'close').catch(() =>
    fail(invalid('The upload ended before it was complete, so nothing unfinished was kept; send it again.')),
  );
  await work;
  if (failure) throw failure;
  if (items.length === 0) throw invalid('The upload holds no file; send one or more as “files”.');
  const [refusal] = refusals;
  if (refusal && refusals.length === items.length) throw refusal;
  return { items, late };
}

function startForm(request: IncomingMessage, maxUploadBytes: number): busboy.Busboy {
  try {
    return busboy({
      headers: request.headers,
      defParamCharset: 'utf8',
      limits: {
        fileSize: maxUploadBytes,
        files: MOST_FILES,
        fields: 20,
        fieldSize: 100_000,
        headerPairs: 50,
      },
    });
  } catch {
    throw invalid('An upload is multipart/form-data with one or more “files”.');
  }
}
