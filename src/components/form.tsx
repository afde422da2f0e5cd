import { zodResolver } from '@hookform/resolvers/zod';
import { useEffect, useId, useRef, type ReactNode } from 'react';
import { FormProvider, useForm, useFormContext, type DefaultValues, type FieldValues } from 'react-hook-form';
import type * as z from 'zod';
import { ApiProblem } from '../lib/api-client.ts';

interface RecordFormProps<T extends FieldValues> {
  /** The resource's own schema: form, client and server share it. */
  schema: z.ZodType;
  defaults: DefaultValues<T>;
  submitLabel: string;
  /** Sends what was entered; a failure with fields lands on them. */
  onSubmit: (values: T) => Promise<unknown>;
  onDone?: () => void;
  children: ReactNode;
}

const flatten = (errors: Record<string, unknown>, prefix = ''): { name: string; message: string }[] =>
  Object.entries(errors).flatMap(([key, value]) => {
    if (value === null || typeof value !== 'object') return [];
    const name = prefix ? `${prefix}.${key}` : key;
    const message = (value as { message?: unknown }).message;
    if (typeof message === 'string') return [{ name, message }];
    return key === 'ref' ? [] : flatten(value as Record<string, unknown>, name);
  });

/** A form whose errors stand at the top and at their fields, all at once; what was typed stays. */
export function RecordForm<T extends FieldValues>({
  schema,
  defaults,
  submitLabel,
  onSubmit,
  onDone,
  children,
}: RecordFormProps<T>) {
  const form = useForm<T>({
    resolver: zodResolver(schema as never) as never,
    defaultValues: defaults,
    mode: 'onSubmit',
    reValidateMode: 'onSubmit',
    shouldFocusError: false,
  });
  const summary = useRef<HTMLDivElement>(null);
  const { errors, isSubmitting, submitCount } = form.formState;
  const found = flatten(errors as Record<string, unknown>);
  useEffect(() => {
    if (submitCount && summary.current) summary.current.focus();
  }, [submitCount, found.length]);
  const submit = form.handleSubmit(async () => {
    try {
      // The server parses the same schema, so the text as typed is sent, not the converted value.
      await onSubmit(form.getValues());
      onDone?.();
    } catch (error) {
      if (!(error instanceof ApiProblem)) throw error;
      const fields = error.document.errors ?? [];
      for (const field of fields)
        form.setError(field.pointer.slice(1).replaceAll('/', '.') as never, { message: field.detail });
      if (!fields.length) form.setError('root.server' as never, { message: error.document.detail });
    }
  });
  return (
    <FormProvider {...form}>
      <form noValidate onSubmit={(event) => void submit(event)} className="grid gap-5 max-w-[66ch]">
        {found.length > 0 && (
          <div ref={summary} tabIndex={-1} role="alert" className="box box-error">
            <p className="font-semibold">
              {found.length === 1
                ? '1 answer needs another look'
                : `${found.length} answers need another look`}
            </p>
            <ul className="list-disc pl-5 mt-1">
              {found.map((one) => (
                <li key={one.name}>
                  {one.name.startsWith('root') ? (
                    one.message
                  ) : (
                    <a href={`#field-${one.name}`}>{one.message}</a>
                  )}
                </li>
              ))}
            </ul>
          </div>
        )}
        {children}
        <div>
          <button type="submit" className="btn" disabled={isSubmitting}>
            {submitLabel}
          </button>
        </div>
      </form>
    </FormProvider>
  );
}

interface FieldProps {
  name: string;
  label: string;
  hint?: ReactNode;
  /** Symbol beside the box; the label says the unit in words. */
  unit?: string;
  isOptional?: boolean;
}

function useField(name: string) {
  const { register, getFieldState, formState } = useFormContext();
  const { error } = getFieldState(name, formState);
  const hintId = useId();
  const errorId = useId();
  return { register, error, hintId, errorId };
}

function FieldFrame({
  name,
  label,
  hint,
  isOptional,
  error,
  hintId,
  errorId,
  children,
}: FieldProps & {
  error: { message?: string | undefined } | undefined;
  hintId: string;
  errorId: string;
  children: ReactNode;
}) {
  return (
    <div>
      <label className="label" htmlFor={`field-${name}`}>
        {label}
        {isOptional && <span className="text-muted font-normal"> (optional)</span>}
      </label>
      {hint && (
        <p className="hint mb-1" id={hintId}>
          {hint}
        </p>
      )}
      {children}
      {error?.message && (
        <p className="error-text mt-1" id={errorId}>
          ⚠ {error.message}
        </p>
      )}
    </div>
  );
}

interface TextFieldProps extends FieldProps {
  inputMode?: 'text' | 'decimal' | 'numeric' | 'email';
  type?: 'text' | 'password' | 'email';
  autoComplete?: string;
  isLong?: boolean;
}

export function TextField({
  inputMode = 'text',
  type = 'text',
  autoComplete = 'off',
  isLong,
  ...props
}: TextFieldProps) {
  const { register, error, hintId, errorId } = useField(props.name);
  const common = {
    id: `field-${props.name}`,
    className: 'input',
    'aria-invalid': Boolean(error),
    'aria-describedby': [props.hint ? hintId : '', error ? errorId : ''].join(' ').trim() || undefined,
  };
  return (
    <FieldFrame {...props} error={error} hintId={hintId} errorId={errorId}>
      {isLong ? (
        <textarea {...common} rows={3} {...register(props.name)} />
      ) : (
        <span className="flex items-center gap-2">
          <input
            {...common}
            type={type}
            inputMode={inputMode}
            autoComplete={autoComplete}
            {...register(props.name)}
          />
          {props.unit && (
            <span aria-hidden className="text-muted whitespace-nowrap">
              {props.unit}
            </span>
          )}
        </span>
      )}
    </FieldFrame>
  );
}

interface Choice {
  value: string;
  label: string;
  /** Heading it stands under; choices of one heading follow each other. */
  group?: string;
}

export function ChoiceField({ options, ...props }: FieldProps & { options: readonly Choice[] }) {
  const { register, error, hintId, errorId } = useField(props.name);
  const groups = [...new Set(options.map((option) => option.group))];
  return (
    <FieldFrame {...props} error={error} hintId={hintId} errorId={errorId}>
      <select
        id={`field-${props.name}`}
        className="input"
        aria-invalid={Boolean(error)}
        aria-describedby={[props.hint ? hintId : '', error ? errorId : ''].join(' ').trim() || undefined}
        {...register(props.name)}
      >
        <option value="">Choose …</option>
        {groups.map((group) => {
          const own = options
            .filter((option) => option.group === group)
            .map((option) => (
              <option key={option.value} value={option.value}>
                {option.label}
              </option>
            ));
          return group ? (
            <optgroup key={group} label={group}>
              {own}
            </optgroup>
          ) : (
            own
          );
        })}
      </select>
    </FieldFrame>
  );
}

export function CheckField({ name, label, hint }: FieldProps) {
  const { register, error, errorId } = useField(name);
  return (
    <div>
      <label className="flex gap-3 items-start min-h-12 py-2" htmlFor={`field-${name}`}>
        <input
          id={`field-${name}`}
          type="checkbox"
          className="size-6 mt-0.5"
          aria-invalid={Boolean(error)}
          aria-describedby={error ? errorId : undefined}
          {...register(name)}
        />
        <span>
          {label}
          {hint && <span className="hint block">{hint}</span>}
        </span>
      </label>
      {error?.message && (
        <p className="error-text" id={errorId}>
          ⚠ {String(error.message)}
        </p>
      )}
    </div>
  );
}
