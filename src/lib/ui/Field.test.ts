import { render } from 'svelte/server';
import { describe, expect, it } from 'vitest';
import NumberInput from './NumberInput.svelte';
import RadioGroup from './RadioGroup.svelte';
import SelectInput from './SelectInput.svelte';
import TextInput from './TextInput.svelte';

/** Value of an attribute of the first element that matches. */
const attribute = (html: string, tag: string, name: string) =>
  new RegExp(`<${tag}\\b[^>]*\\s${name}="([^"]*)"`).exec(html)?.[1];

describe('a field', () => {
  it('ties label and hint to its control', () => {
    const { body } = render(TextInput, { props: { label: 'Place', hint: 'As on the map', name: 'place' } });
    const id = attribute(body, 'input', 'id');
    expect(id).toBeTruthy();
    expect(attribute(body, 'label', 'for')).toBe(id);
    expect(attribute(body, 'input', 'aria-describedby')).toBe(`${id}-hint`);
    expect(body).toContain(`id="${id}-hint"`);
    expect(body).not.toContain('aria-invalid');
  });

  it('ties an error in place of the hint and marks the control', () => {
    const { body } = render(NumberInput, {
      props: {
        label: 'Bank length',
        value: '-140',
        unit: 'm',
        hint: 'Along the water line',
        error: ['Bank length must be above zero. Was this 140?', 'second']
      }
    });
    const id = attribute(body, 'input', 'id');
    expect(attribute(body, 'input', 'aria-describedby')).toBe(`${id}-bad`);
    expect(attribute(body, 'input', 'aria-invalid')).toBe('true');
    expect(body).toContain('Was this 140?');
    expect(body).not.toContain('Along the water line');
  });

  it('keeps what was typed, even where it is no number', () => {
    const { body } = render(NumberInput, { props: { label: 'Growth', value: '1e400 or so' } });
    expect(attribute(body, 'input', 'value')).toBe('1e400 or so');
  });

  it('names the choice of unit after the field and keeps the one chosen', () => {
    const units = [
      { value: 'yr-1', label: 'yr⁻¹' },
      { value: 'd-1', label: 'd⁻¹' }
    ];
    const { body } = render(NumberInput, { props: { label: 'Growth', units, chosenUnit: 'd-1', unitName: 'unit' } });
    expect(attribute(body, 'select', 'aria-label')).toBe('Unit of Growth');
    expect(body).toMatch(/<option value="d-1" selected/);
  });

  it('takes an id of the page’s own', () => {
    const one = render(TextInput, { props: { label: 'A', id: 'a' } }).body;
    const two = render(SelectInput, { props: { label: 'B', options: [], id: 'b' } }).body;
    expect(attribute(one, 'input', 'id')).toBe('a');
    expect(attribute(two, 'select', 'id')).toBe('b');
  });

  it('says an error of a group of choices to the whole group', () => {
    const { body } = render(RadioGroup, {
      props: { legend: 'Interaction', name: 'i', options: [{ value: 'x', label: 'X' }], error: 'Choose one.' }
    });
    const describedBy = attribute(body, 'fieldset', 'aria-describedby');
    expect(body).toContain(`id="${describedBy}"`);
    expect(body).toContain('Choose one.');
  });
});
