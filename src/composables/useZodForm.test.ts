import { enableAutoUnmount, flushPromises, mount } from '@vue/test-utils';
import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest';
import { defineComponent, h } from 'vue';
import { z } from 'zod';
import { useZodForm } from './useZodForm';
import { ApiError } from '@/api/client';
import BaseInput from '@/components/base/BaseInput.vue';
import { i18n, setLanguage } from '@/i18n';

const Schema = z.strictObject({
  name: z.string().trim().min(1, 'errors.field.required'),
  code: z.string().regex(/^\d{4}$/, 'errors.field.last_four'),
});

/** A form of two fields on a page, as a view would have it. */
function makeForm(options: Parameters<typeof useZodForm>[2] = {}) {
  let form!: ReturnType<typeof useForm>;
  const useForm = () => useZodForm(Schema, { name: '', code: '' }, options);
  const Page = defineComponent(() => {
    form = useForm();
    const field = (path: 'name' | 'code') =>
      h(BaseInput, {
        modelValue: form.values[path],
        'onUpdate:modelValue': (typed: string) => (form.values[path] = typed),
        label: path,
        error: form.errorOf(path),
      });
    return () => h('main', [field('name'), field('code')]);
  });
  const page = mount(Page, { attachTo: document.body, global: { plugins: [i18n] } });
  return { form, page };
}

const refused = (fields: ApiError['fields']) =>
  new ApiError(400, { code: 'invalid', message: 'm', requestId: 'r', fields });

enableAutoUnmount(afterEach);
beforeEach(async () => {
  sessionStorage.clear();
  await setLanguage('en');
});

describe('a form that is not right', () => {
  it('is not sent; each wrong field says why, and the first has the focus', async () => {
    const { form, page } = makeForm();
    const send = vi.fn();
    await expect(form.submit(send)).resolves.toBeUndefined();
    await flushPromises();
    expect(send).not.toHaveBeenCalled();
    const [name, code] = page.findAll('input');
    expect(document.activeElement).toBe(name?.element);
    expect(page.text()).toContain('Fill this in.');
    expect(page.text()).toContain('Type the last four digits of the phone.');
    const said = code?.attributes('aria-describedby') ?? '';
    expect(page.find(`[id="${said}"]`).text()).toBe('Type the last four digits of the phone.');
  });

  it('takes a sentence back as soon as its field changes, and only that one', async () => {
    const { form, page } = makeForm();
    await form.submit(() => Promise.resolve());
    await page.findAll('input')[0]?.setValue('Dana');
    expect(form.errorOf('name')).toBeNull();
    expect(form.errorOf('code')).not.toBeNull();
  });

  it('speaks the language that the reader switches to', async () => {
    const { form } = makeForm();
    await form.submit(() => Promise.resolve());
    await setLanguage('es');
    expect(form.errorOf('name')).toBe('Llene este campo.');
  });
});

describe('a form that the server refuses', () => {
  const fill = (form: ReturnType<typeof makeForm>['form']) =>
    Object.assign(form.values, { name: ' Dana ', code: '0142' });

  it('is sent as the schema reads it', async () => {
    const { form } = makeForm();
    fill(form);
    await expect(form.submit((body) => Promise.resolve(body))).resolves.toEqual({
      name: 'Dana',
      code: '0142',
    });
  });

  it('shows what the server says of a field, and keeps what was typed', async () => {
    const { form } = makeForm();
    fill(form);
    await form.submit(() =>
      Promise.reject(refused([{ path: 'code', key: 'errors.field.code', message: 'unused' }])),
    );
    expect(form.errorOf('code')).toBe('Check the code: six characters, as on the stub or tag.');
    expect(form.values).toEqual({ name: ' Dana ', code: '0142' });
    expect(form.isBusy.value).toBe(false);
  });

  it("shows the server's own sentence where the catalogue has none", async () => {
    const { form } = makeForm();
    fill(form);
    const fields = [{ path: 'code', key: 'errors.field.newer_than_this_page', message: 'From the server.' }];
    await form.submit(() => Promise.reject(refused(fields)));
    expect(form.errorOf('code')).toBe('From the server.');
  });

  it('is not sent twice by two presses', async () => {
    const { form } = makeForm();
    fill(form);
    const send = vi.fn(() => new Promise((resolve) => setTimeout(resolve, 5)));
    await Promise.all([form.submit(send), form.submit(send)]);
    expect(send).toHaveBeenCalledOnce();
  });
});

describe('a draft', () => {
  it('is there again after a reload, until it was sent', async () => {
    const first = makeForm({ draftKey: 'trial' });
    await first.page.findAll('input')[0]?.setValue('Dana');
    await first.page.findAll('input')[1]?.setValue('0142');
    first.page.unmount();
    const second = makeForm({ draftKey: 'trial' });
    expect(second.form.values).toEqual({ name: 'Dana', code: '0142' });
    await second.form.submit(() => Promise.resolve('sent'));
    second.page.unmount();
    expect(makeForm({ draftKey: 'trial' }).form.values).toEqual({ name: '', code: '' });
  });

  it('survives a refusal', async () => {
    const first = makeForm({ draftKey: 'trial' });
    await first.page.findAll('input')[0]?.setValue('Dana');
    await first.page.findAll('input')[1]?.setValue('0142');
    await first.form.submit(() => Promise.reject(new Error('the line broke')));
    first.page.unmount();
    expect(makeForm({ draftKey: 'trial' }).form.values.name).toBe('Dana');
  });

  it('is not kept where nobody asked for it', async () => {
    const { page } = makeForm();
    await page.findAll('input')[0]?.setValue('secret');
    expect(JSON.stringify(Object.entries(sessionStorage))).not.toContain('secret');
  });
});
