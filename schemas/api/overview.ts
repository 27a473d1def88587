const text = { type: 'string' } as const;
const object = { type: 'object', additionalProperties: false } as const;

/** One thing that needs this person, with its one action. */
export interface NowItemDto {
  kind: string;
  since: string;
  title: string;
  detail: string;
  href: string;
  action: string;
}

export interface FigureDto {
  label: string;
  value: string;
  note: string;
}

export const nowDto = {
  ...object,
  required: ['items', 'figures'],
  properties: {
    items: {
      type: 'array',
      items: {
        ...object,
        required: ['kind', 'since', 'title', 'detail', 'href', 'action'],
        properties: { kind: text, since: text, title: text, detail: text, href: text, action: text },
      },
    },
    figures: {
      type: 'array',
      items: {
        ...object,
        required: ['label', 'value', 'note'],
        properties: { label: text, value: text, note: text },
      },
    },
  },
} as const;
