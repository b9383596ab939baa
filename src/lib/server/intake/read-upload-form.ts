import { columnUseSchema, mappingSchema, type ColumnUse } from '$lib/intake/column-use';
import type { TrialFile } from './store-upload';

export type UploadForm = { ok: true; file: TrialFile } | { ok: false; message: string };

const maxBytes = 64 * 1024 * 1024;

/** The file and, when columns were chosen by hand, the mapping of an upload form. */
export async function readUploadForm(data: FormData): Promise<UploadForm> {
	const file = data.get('file');
	if (!(file instanceof File) || file.name === '') {
		return { ok: false, message: 'Choose a trial file first.' };
	}
	if (file.size > maxBytes) {
		return { ok: false, message: `${file.name} is over 64 MiB. Upload one visit at a time.` };
	}
	const bytes = new Uint8Array(await file.arrayBuffer());
	const mapping = readMapping(data);
	if (mapping === 'faulty') {
		return { ok: false, message: 'A column is read as something unknown. Read the file again.' };
	}
	return { ok: true, file: { name: file.name, bytes, mapping } };
}

function readMapping(data: FormData) {
	const delimiter = data.get('delimiter');
	if (delimiter === null) return undefined;
	const columns: Record<string, unknown> = {};
	for (let index = 0; data.has(`name.${index}`); index += 1) {
		const name = String(data.get(`name.${index}`));
		columns[name] = readUse(String(data.get(`column.${index}`) ?? 'ignore'));
	}
	const parsed = mappingSchema.safeParse({
		columns,
		delimiter,
		decimalSign: data.get('decimalSign')
	});
	return parsed.success ? parsed.data : 'faulty';
}

function readUse(text: string): ColumnUse | null {
	const [use, variable, unit] = text.split(':');
	const given = use === 'variable' ? { use, variable, unit } : { use };
	return columnUseSchema.safeParse(given).data ?? null;
}
