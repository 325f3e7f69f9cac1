import { mkdirSync, readFileSync } from 'node:fs';
import { join } from 'node:path';
import type { Page } from 'playwright-core';
import { openBrowser, type TestBrowser } from '../support/browser';
import { openHouse, type House } from '../support/house';

const ROOT = join(__dirname, '../..');
/** With LEANYEAR_PICTURES set to a folder, the story also leaves pictures of what it saw. */
const PICTURES = process.env['LEANYEAR_PICTURES'];

describe('the main job, in the browser, by four people', () => {
  let house: House;
  const browsers: TestBrowser[] = [];
  const trouble: string[] = [];
  const outside: string[] = [];
  const passwords = new Map<string, string>();

  beforeAll(async () => {
    house = await openHouse({ demo: true, env: { LEANYEAR_DEMO_SCALE: '0.05' } });
    const accounts = JSON.parse(readFileSync(join(house.dataDir, 'demo-accounts.json'), 'utf8')) as { email: string; password: string }[];
    for (const { email, password } of accounts) passwords.set(email, password);
    if (PICTURES !== undefined) mkdirSync(PICTURES, { recursive: true });
  }, 60_000);
  afterAll(async () => {
    for (const browser of browsers) await browser.close();
    await house.stop();
  });

  const picture = async (page: Page, name: string): Promise<void> => {
    if (PICTURES !== undefined) await page.screenshot({ path: join(PICTURES, `${name}.png`) });
  };

  /** A browser of one person's own, signed in. */
  const person = async (email: string): Promise<Page> => {
    const browser = await openBrowser();
    browsers.push(browser);
    const page = await browser.context.newPage();
    page.setDefaultTimeout(20_000);
    page.on('pageerror', (error) => trouble.push(error.message));
    page.on('console', (message) => {
      if (message.type() === 'error') trouble.push(message.text());
    });
    page.on('request', (request) => {
      if (!request.url().startsWith(house.url) && !/^(data|blob):/.test(request.url())) outside.push(request.url());
    });
    await page.goto(`${house.url}/sign-in`);
    await page.getByLabel('E-mail', { exact: true }).fill(email);
    await page.getByLabel('Password', { exact: true }).fill(passwords.get(email) ?? '');
    await page.getByRole('button', { name: 'Sign in', exact: true }).click();
    await page.waitForURL((url) => !url.pathname.startsWith('/sign-in'));
    return page;
  };

  const choose = async (page: Page, field: string, option: string | RegExp): Promise<void> => {
    await page.getByRole('combobox', { name: field }).click();
    await page.getByRole('option', { name: option }).click();
  };
  const confirm = async (page: Page, action: string, note = 'Agreed.'): Promise<void> => {
    const dialog = page.getByRole('dialog');
    await dialog.getByRole('textbox').fill(note);
    await dialog.getByRole('button', { name: action, exact: true }).click();
  };

  it('goes from two files to a bound contract', async () => {
    // The actuary uploads a catalogue and releases it.
    const abel = await person('abel.curran@house.example');
    await abel.goto(`${house.url}/catalogues`);
    await abel.getByRole('button', { name: 'Open a catalogue' }).click();
    await abel.getByLabel('Name').fill('Merrow hail');
    await abel.getByRole('button', { name: 'Open it' }).click();
    await abel.waitForURL(/\/catalogues\/[0-9a-f-]+$/);
    await abel.locator('input[type=file]').setInputFiles(join(ROOT, 'fixtures/uploads/bad', 'catalogue-rates.csv'));
    await abel.getByText(/problem/i).first().waitFor();
    await abel.locator('input[type=file]').setInputFiles(join(ROOT, 'fixtures/uploads/good/merrow-hail-catalogue.csv'));
    await abel.getByRole('button', { name: 'Release' }).click();
    await confirm(abel, 'Release');
    await abel.getByRole('button', { name: 'Withdraw' }).waitFor();

    // The underwriter opens a submission, uploads losses, sets terms and prices them.
    const una = await person('una.writhe@house.example');
    await una.goto(`${house.url}/submissions/new`);
    await choose(una, 'Cedant', 'Cormorant Assurance');
    await choose(una, 'Broker', 'Quillon Broking');
    await choose(una, 'Contact', /Quinn Aster/);
    await una.getByRole('button', { name: 'Open the submission' }).click();
    await una.waitForURL(/\/losses/);
    await una.getByLabel('Name of the table').fill('Hail');
    await choose(una, 'Event catalogue', /Merrow hail/);
    await una.locator('input[type=file]').setInputFiles(join(ROOT, 'fixtures/uploads/good/cormorant-hail-losses.csv'));
    await una.getByRole('rowheader', { name: /Hail, version 1/ }).waitFor();
    await una.getByRole('tab', { name: 'Programme' }).or(una.getByRole('link', { name: 'Programme' })).first().click();
    await una.getByRole('button', { name: 'Add a programme' }).click();
    await una.getByLabel('Limit of layer 1').fill('5m');
    await una.getByLabel('Attachment of layer 1').fill('5m');
    await una.getByLabel('Written line of layer 1').fill('15');
    await una.getByRole('button', { name: 'Add a layer' }).click();
    await una.getByLabel('Limit of layer 2').fill('0.015bn');
    await picture(una, 'programme');
    await una.getByRole('button', { name: 'Price this' }).click();
    await una.getByRole('heading', { name: 'The lean lens' }).waitFor({ timeout: 60_000 });
    await una.reload();
    await una.getByRole('heading', { name: 'The lean lens' }).waitFor();
    await picture(una, 'price');
    await una.getByRole('button', { name: 'Draft the quote' }).click();
    await una.waitForURL(/\/quotes\/[0-9a-f-]+$/);
    const quote = una.url();
    await una.getByRole('button', { name: 'Submit', exact: true }).click();
    await confirm(una, 'Submit', 'Line as the cedant asks.');
    await una.getByText('referred', { exact: true }).first().waitFor();

    // A senior who is not the submitter clears it.
    const sena = await person('sena.orrick@house.example');
    await sena.goto(`${house.url}/referrals`);
    await sena.getByRole('link', { name: 'Open it' }).first().click();
    await sena.getByRole('button', { name: 'Clear', exact: true }).click();
    await confirm(sena, 'Clear');
    await sena.getByText('approved', { exact: true }).first().waitFor();

    // It reaches the underwriter by itself, who issues it.
    await una.getByRole('button', { name: 'Issue to broker' }).click();
    await confirm(una, 'Issue to broker');
    await una.getByText('issued', { exact: true }).first().waitFor();
    await picture(una, 'quote');

    // The broker orders.
    const quinn = await person('quinn@quillon.example');
    await quinn.goto(`${house.url}/broker`);
    await quinn.getByText('Cormorant Assurance').click();
    const seen = await quinn.locator('main').innerText();
    expect(seen).not.toMatch(/technical|walk-away|adequacy|lean|plentiful/i);
    await quinn.getByRole('button', { name: 'Give the firm order' }).click();
    await quinn.getByText('ordered', { exact: true }).first().waitFor();
    await quinn.goto(quote);
    await quinn.getByText(/not open to you|not for you/i).first().waitFor();

    // The underwriter binds, and finds the contract in the book and the mails in the post room.
    await una.getByRole('button', { name: 'Bind', exact: true }).click();
    await confirm(una, 'Bind');
    await una.getByText('bound', { exact: true }).first().waitFor();
    await una.goto(`${house.url}/book`);
    await una.getByText(/Version 2: 31 contracts/).waitFor();
    await una.goto(`${house.url}/post-room`);
    for (const subject of [/Firm quote LYQ/, /Firm order: LYQ/, /Bound: LYQ/]) await una.getByText(subject).first().waitFor();
    expect({ trouble, outside }).toEqual({ trouble: expect.any(Array) as string[], outside: [] });
    // What a browser itself says of an answer we meant to refuse is no trouble of ours.
    expect(trouble.filter((words) => !/status of (401|403|404|422)/.test(words))).toEqual([]);
  }, 240_000);
});
