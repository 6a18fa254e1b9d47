import { INestApplicationContext, RequestMethod } from '@nestjs/common';
import { METHOD_METADATA, PATH_METADATA } from '@nestjs/common/constants';
import { DiscoveryService, MetadataScanner, Reflector } from '@nestjs/core';
import type { Action } from '@strainwright/common/contract/permissions';
import { ACTION_KEY } from '../../session/caller';

export interface DeclaredRoute {
  method: string;
  /** As Express writes it, under /api: `/orders/:id`. */
  path: string;
  action: Action;
}

/** Every registered route with its action. @throws Error naming each route that declares none: the server does not start then */
export function declaredRoutes(app: INestApplicationContext): DeclaredRoute[] {
  const discovery = app.get(DiscoveryService);
  const reflector = app.get(Reflector);
  const scanner = new MetadataScanner();
  const routes: DeclaredRoute[] = [];
  const without: string[] = [];
  for (const { instance, metatype } of discovery.getControllers()) {
    if (typeof metatype !== 'function' || typeof instance !== 'object' || instance === null) continue;
    const prototype = Object.getPrototypeOf(instance) as Record<string, unknown>;
    for (const name of scanner.getAllMethodNames(prototype)) {
      const handler = prototype[name];
      if (typeof handler !== 'function') continue;
      const method = Reflect.getMetadata(METHOD_METADATA, handler) as RequestMethod | undefined;
      if (method === undefined) continue;
      const action = reflector.getAllAndOverride<Action | undefined>(ACTION_KEY, [handler as () => unknown, metatype]);
      if (action === undefined) without.push(`${metatype.name}.${name}`);
      else for (const path of pathsOf(metatype, handler)) routes.push({ method: RequestMethod[method], path, action });
    }
  }
  if (without.length > 0) throw new Error(`These routes declare no action of contract/permissions: ${without.join(', ')}`);
  return routes;
}

function pathsOf(controller: object, handler: object): string[] {
  const list = (target: object): string[] => [Reflect.getMetadata(PATH_METADATA, target) as string | string[]].flat();
  return list(controller).flatMap((base) => list(handler).map((own) => `/${[base, own].map((part) => part.replace(/^\/|\/$/g, '')).filter((part) => part !== '').join('/')}`));
}
