import type { Request, Response } from 'express';
import multer from 'multer';
import { AppError } from '../../errors.ts';
import type { Upload } from './upload-service.ts';

/** The file's own name without folders and control characters, which have no place in a list. */
const nameOf = (given: string): string => {
  const last = given.split(/[\\/]/).at(-1) ?? '';
  return (
    last
      .replace(/\p{Cc}/gu, '')
      .trim()
      .slice(0, 200) || 'schedule.csv'
  );
};

/** Hands the file of a form on while it arrives; the form's reader keeps none of it. */
export function receiveFile<T>(req: Request, res: Response, take: (upload: Upload) => Promise<T>): Promise<T> {
  return new Promise((resolve, reject) => {
    let taken: Promise<T> | null = null;
    const storage: multer.StorageEngine = {
      _handleFile: (_req, file, done) => {
        taken = take({ name: nameOf(file.originalname), bytes: file.stream });
        taken.then(
          () => done(null, {}),
          (error: unknown) => {
            // The rest of the body is read and dropped, so that the sender gets to read the answer.
            file.stream.resume();
            done(error);
          },
        );
      },
      _removeFile: (_req, _file, done) => done(null),
    };
    const form = multer({ storage, limits: { files: 1, fields: 4, parts: 8 }, defParamCharset: 'utf8' });
    form.single('file')(req, res, (error: unknown) => {
      if (error) reject(error);
      else if (taken) taken.then(resolve, reject);
      else reject(new AppError('invalid_request', 'Choose a file: the form holds none in the field “file”.'));
    });
  });
}
