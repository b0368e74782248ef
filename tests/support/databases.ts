import { Client } from "pg";

export function urlOf(serverUrl: string, name: string): string {
  const url = new URL(serverUrl);
  url.pathname = `/${name}`;
  return url.toString();
}

async function onServer(serverUrl: string, statement: string): Promise<void> {
  const client = new Client({ connectionString: urlOf(serverUrl, "postgres") });
  await client.connect();
  try {
    await client.query(statement);
  } finally {
    await client.end();
  }
}

export async function createDatabase(serverUrl: string, name: string, template?: string): Promise<void> {
  await onServer(serverUrl, `create database "${name}"${template ? ` template "${template}"` : ""}`);
}

export async function dropDatabase(serverUrl: string, name: string): Promise<void> {
  await onServer(serverUrl, `drop database if exists "${name}" with (force)`);
}
