// What a journey needs: a browser with a page a person, the sink's mailbox, screenshots, and what the browser complained of.
import { mkdir } from "node:fs/promises";
import path from "node:path";
import { setTimeout as delay } from "node:timers/promises";
import { chromium, type Browser, type BrowserContext, type Page } from "playwright-core";
import { readMailbox, type StoredMail } from "../../emails/mailbox";
import type { Product } from "../support/product";

export interface Step {
  readonly title: string;
  run(): Promise<void>;
}

export interface Journey {
  readonly title: string;
  steps(world: JourneyWorld): Step[];
}

const OUTPUT = path.join("tests", "output", "journeys");
const MAIL_WITHIN_MS = 30_000;
export const DESKTOP = { width: 1440, height: 1000 };
export const PHONE = { width: 390, height: 844 };

export class JourneyWorld {
  private readonly people = new Map<string, BrowserContext>();
  private readonly heard: string[] = [];

  constructor(
    readonly product: Product,
    private readonly browser: Browser,
  ) {}

  /** The page of one person: a browser of their own, which keeps its session from step to step. */
  async page(person: string): Promise<Page> {
    const context = this.people.get(person) ?? (await this.openContext(person));
    return context.pages()[0] ?? context.newPage();
  }

  private async openContext(person: string): Promise<BrowserContext> {
    const context = await this.browser.newContext({ baseURL: this.product.appUrl, viewport: DESKTOP });
    this.people.set(person, context);
    context.on("page", (page) => {
      page.on("pageerror", (error) => this.heard.push(`${person}: ${error.message}`));
      page.on("console", (message) => {
        const text = message.text();
        // A refused form or an absent page is an answer, told by the browser as an error of loading.
        if (message.type() === "error" && !text.startsWith("Failed to load resource"))
          this.heard.push(`${person} at ${page.url()}: ${text}`);
      });
    });
    return context;
  }

  /** A page with script switched off, signed in as the person is now. */
  async pageWithoutScript(person: string): Promise<Page> {
    const state = await (await this.page(person)).context().storageState();
    const key = `${person}, without script`;
    await this.people.get(key)?.close();
    const options = { baseURL: this.product.appUrl, viewport: DESKTOP, javaScriptEnabled: false, storageState: state };
    const context = await this.browser.newContext(options);
    this.people.set(key, context);
    return context.newPage();
  }

  /** Errors of scripts and of the content security policy that any page met. */
  complaints(): readonly string[] {
    return this.heard;
  }

  /** Waits for a mail to an address whose subject matches; reads the sink's mailbox over POP3. */
  async mail(address: string, subject: RegExp): Promise<StoredMail> {
    const deadline = Date.now() + MAIL_WITHIN_MS;
    for (;;) {
      const mails = await readMailbox({ port: this.product.popPort, address });
      const found = mails.find((mail) => subject.test(mail.subject));
      if (found) return found;
      if (Date.now() > deadline)
        throw new Error(
          `no mail to ${address} matches ${subject}; there are: ${mails.map((m) => m.subject).join(" | ")}`,
        );
      await delay(200);
    }
  }

  mails(address?: string): Promise<StoredMail[]> {
    return readMailbox(address ? { port: this.product.popPort, address } : { port: this.product.popPort });
  }

  /** Pictures at 1440 and 390 pixels, light and dark, in an ignored folder. */
  async pictures(person: string, name: string, folder = OUTPUT): Promise<void> {
    await mkdir(folder, { recursive: true });
    const page = await this.page(person);
    for (const [width, size] of [["1440", DESKTOP] as const, ["390", PHONE] as const])
      for (const colorScheme of ["light", "dark"] as const) {
        await page.setViewportSize(size);
        await page.emulateMedia({ colorScheme });
        await page.waitForTimeout(150);
        await page.screenshot({ path: path.join(folder, `${name}-${width}-${colorScheme}.png`), fullPage: true });
      }
    await page.setViewportSize(DESKTOP);
    await page.emulateMedia({ colorScheme: "light" });
  }

  /** What each person sees now, for a step that failed. */
  async screenshotAll(name: string): Promise<void> {
    await mkdir(OUTPUT, { recursive: true });
    for (const [person, context] of this.people)
      for (const page of context.pages().slice(0, 1)) {
        const file = path.join(OUTPUT, `${name}-${person}.png`);
        await page.screenshot({ path: file, fullPage: true }).catch(() => undefined);
      }
  }

  async close(): Promise<void> {
    await this.browser.close();
  }
}

export async function openBrowser(product: Product): Promise<JourneyWorld> {
  const browser = await chromium.launch({
    executablePath: "/usr/bin/chromium",
    args: [
      "--no-sandbox",
      "--disable-gpu",
      "--disable-background-networking",
      "--disable-component-update",
      "--disable-sync",
    ],
  });
  return new JourneyWorld(product, browser);
}

/** Signs a person in by the form and waits for the page after it. */
export async function signIn(page: Page, email: string, password: string): Promise<void> {
  await page.goto("/sign-in");
  await page.getByLabel("E-mail").fill(email);
  await page.getByLabel("Password").fill(password);
  await page.getByRole("button", { name: "Sign in" }).click();
  await page.waitForURL(/open-points/);
}
