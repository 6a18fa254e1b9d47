import { INestApplicationContext, RequestMethod } from '@nestjs/common';
import { METHOD_METADATA, PATH_METADATA } from '@nestjs/common/constants';
import { DiscoveryService, MetadataScanner } from '@nestjs/core';
import type { Action } from '@strainwright/common/contract/permissions';
import { ACTION_KEY } from '../../session/caller';

export interface DeclaredRoute {
  method: string;
  /** As Express writes it, under /api: `/orders/:id`. */
  path: string;
  action: Action;
}

/** A class with its instance type unknown: Nest's own `Type`, as discovery hands it out. */
type Controller = abstract new (...args: never[]) => unknown;

/** Every registered route with its action. @throws Error naming each route that declares none: the server does not start then */
export function declaredRoutes(app: INestApplicationContext): DeclaredRoute[] {
  const controllers = app.get(DiscoveryService).getControllers().flatMap(({ metatype }) => (typeof metatype === 'function' ? [metatype as Controller] : []));
  return routesOf(controllers);
}

/** The routes of controller classes, read from their decorators. @throws Error naming each route that declares no action */
export function routesOf(controllers: readonly Controller[]): DeclaredRoute[] {
  const scanner = new MetadataScanner();
  const routes: DeclaredRoute[] = [];
  const without: string[] = [];
  for (const controller of controllers) {
    const prototype = controller.prototype as Record<string, unknown>;
    for (const name of scanner.getAllMethodNames(prototype)) {
      const handler = prototype[name];
      if (typeof handler !== 'function') continue;
      const method = Reflect.getMetadata(METHOD_METADATA, handler) as RequestMethod | undefined;
      if (method === undefined) continue;
      const action = (Reflect.getMetadata(ACTION_KEY, handler) ?? Reflect.getMetadata(ACTION_KEY, controller)) as Action | undefined;
      if (action === undefined) without.push(`${controller.name}.${name}`);
      else for (const path of pathsOf(controller, handler)) routes.push({ method: RequestMethod[method], path, action });
    }
  }
  if (without.length > 0) throw new Error(`These routes declare no action of contract/permissions: ${without.join(', ')}`);
  return routes;
}

function pathsOf(controller: object, handler: object): string[] {
  const list = (target: object): string[] => [Reflect.getMetadata(PATH_METADATA, target) as string | string[]].flat();
  return list(controller).flatMap((base) => list(handler).map((own) => `/${[base, own].map((part) => part.replace(/^\/|\/$/g, '')).filter((part) => part !== '').join('/')}`));
}
